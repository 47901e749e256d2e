import { spawn } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'

// What a build is made from. A file that no folder or name here covers cannot change the product.
const FOLDERS = ['app', 'db', 'fonts', 'lib', 'migrations', 'public']
const FILES = [
  'next.config.mjs',
  'package-lock.json',
  'package.json',
  'postcss.config.mjs',
  'proxy.ts',
  'tailwind.config.ts',
  'tsconfig.json',
]

interface Build {
  /** False when the last build was of the very same sources and stood. */
  isNew: boolean
  log: string
}

/** Builds the web server's code when the sources are not those of the last build. */
export async function ensureBuild(root: string, say: (line: string) => void): Promise<Build> {
  const digest = sourceDigest(root)
  const stamp = join(root, '.next/evenlot-build.json')
  const last = existsSync(stamp)
    ? (JSON.parse(readFileSync(stamp, 'utf8')) as { digest: string; log: string })
    : null
  if (last?.digest === digest && existsSync(join(root, '.next/BUILD_ID')))
    return { isNew: false, log: last.log }

  say('Building (next build)')
  const { code, log } = await nextBuild(root)
  if (code !== 0) throw new Error(`The build failed.\n${log}`)
  writeFileSync(stamp, JSON.stringify({ digest, log }))
  return { isNew: true, log }
}

function nextBuild(root: string): Promise<{ code: number | null; log: string }> {
  return new Promise((resolve, reject) => {
    const build = spawn(process.execPath, [join(root, 'node_modules/next/dist/bin/next'), 'build'], {
      cwd: root,
      env: { ...process.env, NODE_ENV: 'production', NEXT_TELEMETRY_DISABLED: '1' },
      stdio: ['ignore', 'pipe', 'pipe'],
    })
    let log = ''
    build.stdout.on('data', (chunk: Buffer) => (log += chunk.toString()))
    build.stderr.on('data', (chunk: Buffer) => (log += chunk.toString()))
    build.on('error', reject)
    build.on('close', (code) => resolve({ code, log }))
  })
}

function sourceDigest(root: string): string {
  const digest = createHash('sha256')
  for (const path of [...FILES, ...FOLDERS.flatMap((folder) => filesUnder(root, folder))]) {
    const file = join(root, path)
    if (existsSync(file)) digest.update(`${path}\0`).update(readFileSync(file)).update('\0')
  }
  return digest.digest('hex')
}

function filesUnder(root: string, folder: string): string[] {
  if (!existsSync(join(root, folder))) return []
  const entries = readdirSync(join(root, folder), { withFileTypes: true })
  return entries
    .sort((a, b) => (a.name < b.name ? -1 : 1))
    .flatMap((entry) =>
      entry.isDirectory() ? filesUnder(root, `${folder}/${entry.name}`) : [`${folder}/${entry.name}`],
    )
}
