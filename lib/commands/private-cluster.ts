import { randomBytes } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs'
import { asClusterAdmin, newPasswords, type ClusterAccess } from './cluster-access'
import { clusterFolder } from './cluster-place'
import { processIsAlive } from './cluster-process'
import { prepareDatabase, prepareRoles } from './cluster-roles'
import { createServerFolder, serverIsRunning, startServer, stopServer, type Server } from './cluster-server'
import { holdLock } from './file-lock'
import { freePort } from './free-port'
import { postgresAccount, postgresPrograms } from './postgres-programs'

export interface PrivateCluster {
  access: ClusterAccess
  /** The database was made just now. */
  isNew: boolean
  /** Leaves the cluster; the last to leave stops it. */
  stop(): Promise<void>
}

interface Options {
  root: string
  say: (line: string) => void
}

export const PRODUCT_DATABASE = 'evenlot'

/** The cluster that keeps its data in the project's folder. Started when it is not running, shared when it is. */
export async function openPrivateCluster({ root, say }: Options): Promise<PrivateCluster> {
  const account = postgresAccount()
  const programs = await postgresPrograms(say)
  const folder = `${await clusterFolder(root, account)}/cluster`
  mkdirSync(`${folder}/users`, { recursive: true, mode: 0o711 })
  const server = { folder, programs, account, throwAway: false }

  return locked(folder, async () => {
    const kept = readAccess(folder) ?? { port: await freePort(), passwords: newPasswords() }
    // Written before the cluster is made: a cluster whose passwords were lost could not be entered again.
    writeAccess(folder, kept)
    if (!existsSync(`${folder}/data`)) say('Making a private PostgreSQL cluster')
    await createServerFolder(server, kept.passwords.cluster_admin)
    const access = serverIsRunning(server) ? kept : await startOnFreePort(server, kept)
    writeAccess(folder, access)
    await prepareRoles(access)
    const isNew = await asClusterAdmin(access, (client) => prepareDatabase(client, PRODUCT_DATABASE))
    const leave = register(folder)
    return {
      access,
      isNew,
      stop: () =>
        locked(folder, async () => (leave(), others(folder).length === 0 && (await stopServer(server)))),
    }
  })
}

/** A cluster for one run of the tests: quick rather than durable, and gone when it is stopped. */
export async function openThrowAwayCluster({ root, say }: Options): Promise<PrivateCluster> {
  const account = postgresAccount()
  const programs = await postgresPrograms(say)
  const place = await clusterFolder(root, account)
  const folder = `${place}/test-${process.pid}-${randomBytes(3).toString('hex')}`
  await locked(place, () => sweepAbandoned(place, { programs, account }))
  mkdirSync(folder, { mode: 0o711 })

  const server = { folder, programs, account, throwAway: true }
  const passwords = newPasswords()
  await createServerFolder(server, passwords.cluster_admin)
  const access = await startOnFreePort(server, { port: await freePort(), passwords })
  await prepareRoles(access)
  return {
    access,
    isNew: true,
    stop: async () => {
      await stopServer(server)
      rmSync(folder, { recursive: true, force: true })
    },
  }
}

async function locked(folder: string, work: () => Promise<void | false>): Promise<void>
async function locked<T>(folder: string, work: () => Promise<T>): Promise<T>
async function locked<T>(folder: string, work: () => Promise<T>): Promise<T> {
  const release = await holdLock(`${folder}/lock`)
  try {
    return await work()
  } finally {
    await release()
  }
}

async function startOnFreePort(server: Server, kept: ClusterAccess): Promise<ClusterAccess> {
  let port = await freePort(kept.port)
  for (let attempt = 1; ; attempt += 1) {
    try {
      await startServer(server, port)
      return { ...kept, port }
    } catch (failure) {
      // Between finding the port free and listening on it, another program may take it.
      if (attempt === 3) throw failure
      port = await freePort()
    }
  }
}

/** A run killed outright cannot clean up after itself; the next one does it. */
async function sweepAbandoned(place: string, parts: Pick<Server, 'programs' | 'account'>): Promise<void> {
  for (const name of readdirSync(place)) {
    const pid = /^test-(\d+)-[0-9a-f]+$/.exec(name)?.[1]
    if (!pid || processIsAlive(Number(pid))) continue
    await stopServer({ ...parts, folder: `${place}/${name}`, throwAway: true })
    rmSync(`${place}/${name}`, { recursive: true, force: true })
  }
}

function register(folder: string): () => void {
  const mark = `${folder}/users/${process.pid}-${randomBytes(3).toString('hex')}`
  writeFileSync(mark, '')
  return () => rmSync(mark, { force: true })
}

function others(folder: string): string[] {
  return readdirSync(`${folder}/users`).filter((mark) => {
    if (processIsAlive(Number(mark.split('-')[0]))) return true
    rmSync(`${folder}/users/${mark}`, { force: true })
    return false
  })
}

function readAccess(folder: string): ClusterAccess | undefined {
  const path = `${folder}/access.json`
  return existsSync(path) ? (JSON.parse(readFileSync(path, 'utf8')) as ClusterAccess) : undefined
}

function writeAccess(folder: string, access: ClusterAccess): void {
  // Written beside and renamed, so that a run killed here leaves the old file whole.
  writeFileSync(`${folder}/access.json.new`, JSON.stringify(access), { mode: 0o600 })
  renameSync(`${folder}/access.json.new`, `${folder}/access.json`)
}
