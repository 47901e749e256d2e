import {
  appendFileSync,
  chownSync,
  existsSync,
  mkdirSync,
  readFileSync,
  renameSync,
  rmSync,
  writeFileSync,
} from 'node:fs'
import { clearStalePid, clusterIsRunning } from './cluster-process'
import { runProgram, type Account } from './run-program'

/** One PostgreSQL server: `folder` is ours, `folder/data` and `folder/log` belong to the account it runs as. */
export interface Server {
  folder: string
  programs: string
  account: Account | undefined
  throwAway: boolean
}

/** The name by which the database's clock knows that it may be set: only clusters made here carry it. */
const CLUSTER_NAME = 'evenlot-private'

/** Makes the data folder when there is none. Made beside and renamed, so a half-made one is never taken for whole. */
export async function createServerFolder(server: Server, adminPassword: string): Promise<void> {
  const { folder, programs, account, throwAway } = server
  if (existsSync(`${folder}/data/PG_VERSION`)) return
  const passwordFile = `${folder}/initial-password`
  rmSync(`${folder}/data.new`, { recursive: true, force: true })
  for (const name of ['data.new', 'log']) {
    mkdirSync(`${folder}/${name}`, { recursive: true, mode: 0o700 })
    giveTo(account, `${folder}/${name}`)
  }
  rmSync(passwordFile, { force: true })
  writeFileSync(passwordFile, `${adminPassword}\n`, { mode: 0o600 })
  giveTo(account, passwordFile)
  try {
    const format = ['--encoding=UTF8', '--locale=C.UTF-8', '--data-checksums']
    const entry = ['--username=cluster_admin', '--auth=scram-sha-256', `--pwfile=${passwordFile}`]
    const speed = throwAway ? ['--no-sync'] : []
    await runProgram(`${programs}/initdb`, ['-D', `${folder}/data.new`, ...format, ...entry, ...speed], {
      account,
    })
  } finally {
    rmSync(passwordFile, { force: true })
  }
  appendFileSync(`${folder}/data.new/postgresql.conf`, "\ninclude_if_exists = 'evenlot.conf'\n")
  renameSync(`${folder}/data.new`, `${folder}/data`)
}

export function serverIsRunning({ folder }: Server): boolean {
  return clusterIsRunning(`${folder}/data`)
}

export async function startServer(server: Server, port: number): Promise<void> {
  const { folder, programs, account } = server
  await clearStalePid(`${folder}/data`)
  writeSettings(server, port)
  const log = `${folder}/log/postgresql.log`
  try {
    const where = ['-D', `${folder}/data`, '-l', log]
    await runProgram(`${programs}/pg_ctl`, ['start', '--wait', '--timeout=120', '--silent', ...where], {
      account,
    })
  } catch (failure) {
    const lines = existsSync(log) ? readFileSync(log, 'utf8').trimEnd().split('\n').slice(-12) : []
    throw new Error(`PostgreSQL did not start. Its last words:\n${lines.join('\n')}`, { cause: failure })
  }
}

export async function stopServer(server: Server): Promise<void> {
  const { folder, programs, account, throwAway } = server
  if (!serverIsRunning(server)) return
  const mode = throwAway ? 'immediate' : 'fast'
  const stop = ['stop', '-D', `${folder}/data`, `--mode=${mode}`, '--wait', '--timeout=60', '--silent']
  await runProgram(`${programs}/pg_ctl`, stop, { account })
}

function writeSettings({ folder, account, throwAway }: Server, port: number): void {
  const settings: Record<string, string> = {
    cluster_name: CLUSTER_NAME,
    listen_addresses: '127.0.0.1',
    port: String(port),
    // Loopback with a password is the only way in; a socket file would be a second one.
    unix_socket_directories: '',
    password_encryption: 'scram-sha-256',
    max_connections: '200',
    timezone: 'UTC',
    log_timezone: 'UTC',
    ...(throwAway ? { fsync: 'off', synchronous_commit: 'off', full_page_writes: 'off' } : {}),
  }
  const path = `${folder}/data/evenlot.conf`
  const lines = Object.entries(settings).map(([name, value]) => `${name} = '${value}'\n`)
  writeFileSync(path, lines.join(''), { mode: 0o600 })
  giveTo(account, path)
}

function giveTo(account: Account | undefined, path: string): void {
  if (account) chownSync(path, account.uid, account.gid)
}
