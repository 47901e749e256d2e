import { spawnSync } from 'node:child_process'
import {
  chmodSync,
  existsSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import pg from 'pg'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { asClusterAdmin, clusterUrl, type ClusterLogin } from '@/lib/commands/cluster-access'
import { clusterFolder } from '@/lib/commands/cluster-place'
import { openPrivateCluster, openThrowAwayCluster, type PrivateCluster } from '@/lib/commands/private-cluster'
import { postgresAccount } from '@/lib/commands/postgres-programs'

let root: string
let opened: PrivateCluster[]
const say = () => undefined

beforeEach(() => {
  root = mkdtempSync(join(tmpdir(), 'evenlot-cluster-'))
  chmodSync(root, 0o755)
  opened = []
})
afterEach(async () => {
  for (const cluster of opened) await cluster.stop()
  rmSync(root, { recursive: true, force: true })
})

async function open(): Promise<PrivateCluster> {
  const cluster = await openPrivateCluster({ root, say })
  opened.push(cluster)
  return cluster
}

async function ask<T>(cluster: PrivateCluster, login: ClusterLogin, question: string): Promise<T> {
  const client = new pg.Client({ connectionString: clusterUrl(cluster.access, login, 'evenlot') })
  await client.connect()
  try {
    return (await client.query<{ answer: T }>(question)).rows[0]!.answer
  } finally {
    await client.end()
  }
}

function serverPid(folder = `${root}/.data/cluster`): number {
  return Number(readFileSync(`${folder}/data/postmaster.pid`, 'utf8').split('\n')[0])
}

async function gone(pid: number): Promise<void> {
  await expect.poll(() => existsSync(`/proc/${pid}/cwd`), { timeout: 10_000 }).toBe(false)
}

describe('the private cluster', () => {
  it('listens on loopback alone, asks for a password, checks its pages and carries its name', async () => {
    const cluster = await open()
    const setting = (name: string) =>
      ask<string>(cluster, 'cluster_admin', `select current_setting('${name}') as answer`)
    expect(await setting('listen_addresses')).toBe('127.0.0.1')
    expect(await setting('unix_socket_directories')).toBe('')
    expect(await setting('data_checksums')).toBe('on')
    expect(await setting('cluster_name')).toBe('evenlot-private')
    expect(await setting('fsync')).toBe('on')

    const wrong = { ...cluster.access, passwords: { ...cluster.access.passwords, app: 'guessed' } }
    const client = new pg.Client({ connectionString: clusterUrl(wrong, 'app', 'evenlot') })
    await expect(client.connect()).rejects.toThrow('password authentication failed')
  })

  it('keeps its passwords where only its owner reads them', async () => {
    await open()
    expect(statSync(`${root}/.data/cluster/access.json`).mode & 0o777).toBe(0o600)
    expect(existsSync(`${root}/.data/cluster/initial-password`)).toBe(false)
  })

  it('is one cluster when two starts come at once, and runs until the last has left', async () => {
    const [first, second] = await Promise.all([open(), open()])
    expect(second.access).toEqual(first.access)
    expect([first.isNew, second.isNew].filter(Boolean)).toHaveLength(1)

    const pid = serverPid()
    await opened.shift()!.stop()
    expect(await ask(opened[0]!, 'app', 'select 1 as answer')).toBe(1)
    await opened.shift()!.stop()
    await gone(pid)
  })

  it('keeps its data and its port over a stop', async () => {
    const first = await open()
    await asClusterAdmin(first.access, (client) => client.query('create table kept (n integer)'), 'evenlot')
    await opened.shift()!.stop()
    const second = await open()
    expect(second.access.port).toBe(first.access.port)
    expect(second.isNew).toBe(false)
    expect(await ask(second, 'owner', "select to_regclass('kept')::text as answer")).toBe('kept')
  })

  it('comes back after its server was killed outright', async () => {
    await open()
    const pid = serverPid()
    process.kill(pid, 'SIGKILL')
    await gone(pid)
    expect(existsSync(`${root}/.data/cluster/data/postmaster.pid`)).toBe(true)
    const again = await open()
    expect(await ask(again, 'app', 'select 1 as answer')).toBe(1)
  })

  it('is not deceived by a pid that was given to another process', async () => {
    await open()
    await opened.shift()!.stop()
    writeFileSync(`${root}/.data/cluster/data/postmaster.pid`, `${process.pid}\n${root}/.data/cluster/data\n`)
    const again = await open()
    expect(await ask(again, 'app', 'select 1 as answer')).toBe(1)
    expect(serverPid()).not.toBe(process.pid)
  })

  it('outlives the making of a cluster that was cut short', async () => {
    await open()
    await opened.shift()!.stop()
    // What initdb leaves when it is killed: a folder beside, never under the real name.
    rmSync(`${root}/.data/cluster/data`, { recursive: true })
    expect(readdirSync(`${root}/.data/cluster`)).toContain('access.json')
    const again = await open()
    expect(again.isNew).toBe(true)
  })

  it('lives under /var/tmp when its account cannot enter the checkout', async ({ skip }) => {
    const account = postgresAccount()
    if (!account) return skip('only root drops to another account')
    chmodSync(root, 0o700)
    const place = await clusterFolder(root, account)
    try {
      expect(place).toMatch(/^\/var\/tmp\/evenlot-[0-9a-f]{12}$/)
      const cluster = await open()
      expect(await ask(cluster, 'app', 'select 1 as answer')).toBe(1)
      await opened.shift()!.stop()
    } finally {
      rmSync(place, { recursive: true, force: true })
    }
  })
})

describe('a throw-away cluster', () => {
  it('trades safety for speed, and leaves nothing behind', async () => {
    const cluster = await openThrowAwayCluster({ root, say })
    const { rows } = await asClusterAdmin(cluster.access, (client) => client.query('show fsync'))
    expect(rows).toEqual([{ fsync: 'off' }])
    await cluster.stop()
    expect(readdirSync(`${root}/.data`).filter((name) => name.startsWith('test-'))).toEqual([])
  })

  it('is cleared away by the next when its run was killed', async () => {
    const program = `
      import { openThrowAwayCluster } from './lib/commands/private-cluster.ts'
      await openThrowAwayCluster({ root: ${JSON.stringify(root)}, say: () => undefined })
      process.kill(process.pid, 'SIGKILL')`
    spawnSync(process.execPath, ['--import', 'tsx', '--input-type=module', '--eval', program])
    const abandoned = `${root}/.data/${readdirSync(`${root}/.data`).find((name) => name.startsWith('test-'))!}`
    const pid = serverPid(abandoned)
    expect(existsSync(`/proc/${pid}/cwd`)).toBe(true)

    const next = await openThrowAwayCluster({ root, say })
    expect(existsSync(abandoned)).toBe(false)
    await gone(pid)
    await next.stop()
  })
})
