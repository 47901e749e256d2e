import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { ensureDebianPackages } from './debian-packages'
import type { Account } from './run-program'

const VERSIONS = '/usr/lib/postgresql'

/** The folder of PostgreSQL's programs, newest version first, installing the package when there is none. */
export async function postgresPrograms(say: (line: string) => void): Promise<string> {
  const found = newest()
  if (found) return found
  await ensureDebianPackages(['postgresql'], say)
  const installed = newest()
  if (!installed) throw new Error(`PostgreSQL was installed, but its programs are not under ${VERSIONS}.`)
  return installed
}

/** The account that PostgreSQL runs as: nobody but ourselves, unless we are root, which it refuses. */
export function postgresAccount(): Account | undefined {
  if (process.getuid?.() !== 0) return undefined
  const accounts = readFileSync('/etc/passwd', 'utf8').split('\n')
  for (const wanted of ['postgres', 'nobody']) {
    const fields = accounts.find((line) => line.startsWith(`${wanted}:`))?.split(':')
    if (fields) return { name: wanted, uid: Number(fields[2]), gid: Number(fields[3]) }
  }
  throw new Error('PostgreSQL refuses to run as root, and there is neither an account postgres nor nobody.')
}

function newest(): string | undefined {
  if (!existsSync(VERSIONS)) return undefined
  const versions = readdirSync(VERSIONS)
    .filter((name) => existsSync(`${VERSIONS}/${name}/bin/initdb`))
    .sort((a, b) => Number(b) - Number(a))
  return versions[0] && `${VERSIONS}/${versions[0]}/bin`
}
