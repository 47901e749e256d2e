import { existsSync, mkdirSync, rmSync, writeFileSync } from 'node:fs'
import { programSucceeds, runProgram } from './run-program'

const CLUSTER_SETTINGS = '/etc/postgresql-common/createcluster.d'

/** Installs the Debian packages that are missing; as an ordinary user it says what an administrator must run. */
export async function ensureDebianPackages(packages: string[], say: (line: string) => void): Promise<void> {
  const missing: string[] = []
  for (const name of packages) if (!(await isInstalled(name))) missing.push(name)
  if (missing.length === 0) return

  const command = `apt-get install -y --no-install-recommends ${missing.join(' ')}`
  if (process.getuid?.() !== 0) {
    throw new Error(
      `These Debian packages are missing: ${missing.join(', ')}. An administrator must run: ${command}`,
    )
  }
  say(`Installing ${missing.join(', ')} from Debian's packages`)
  await withoutDefaultCluster(missing, async () => {
    const install = ['install', '-y', '--no-install-recommends', ...missing]
    const env = { DEBIAN_FRONTEND: 'noninteractive' }
    if (await programSucceeds('apt-get', install, { env })) return
    // A fresh image has no package lists, or lists so old that the files are gone.
    await runProgram('apt-get', ['update'], { env })
    await runProgram('apt-get', install, { env })
  })
}

async function isInstalled(name: string): Promise<boolean> {
  const status = await runProgram('dpkg-query', ['-W', '-f=${Status}', name]).catch(() => '')
  return status.includes('install ok installed')
}

/** The PostgreSQL package would make and start a cluster of its own on port 5432; ours is private. */
async function withoutDefaultCluster(packages: string[], install: () => Promise<void>): Promise<void> {
  if (!packages.includes('postgresql')) return install()
  const setting = `${CLUSTER_SETTINGS}/evenlot.conf`
  const folderExisted = existsSync(CLUSTER_SETTINGS)
  mkdirSync(CLUSTER_SETTINGS, { recursive: true })
  writeFileSync(setting, 'create_main_cluster = false\n')
  try {
    await install()
  } finally {
    rmSync(setting, { force: true })
    // The package brings the folder itself in newer releases; only an empty one of ours goes.
    if (!folderExisted) await programSucceeds('rmdir', [CLUSTER_SETTINGS])
  }
}
