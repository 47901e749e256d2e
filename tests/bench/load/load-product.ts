import { randomBytes } from 'node:crypto'
import { readdirSync, readFileSync } from 'node:fs'
import { migrateDatabase } from '@/db/commands/migrate-database'
import { Children } from '@/lib/commands/children'
import { asClusterAdmin, clusterUrl, type ClusterAccess } from '@/lib/commands/cluster-access'
import { prepareDatabase } from '@/lib/commands/cluster-roles'
import { freePort } from '@/lib/commands/free-port'
import { privateEnvironment } from '@/lib/commands/private-run'
import { ensureBuild } from '@/lib/commands/product-build'
import { startFakeMail, startProduct } from '@/lib/commands/product-processes'
import type { TestRun } from '@/lib/commands/test-run'

const DATABASE = 'load'

export interface LoadProduct {
  readonly base: string
  readonly access: Readonly<Record<'DATABASE_URL' | 'DATABASE_OWNER_URL' | 'AUTH_SECRET', string>>
  /** Which child ended though nobody asked it to, once one does. */
  readonly unexpectedEnd: Children['unexpectedEnd']
  /** Of the web process, in bytes. */
  webMemory(): number
}

/** The built product with an empty database of its own, its worker and its mail service; all end with the run. */
export async function startLoadProduct(run: TestRun): Promise<LoadProduct> {
  const { root, folder, say } = run
  await ensureBuild(root, say)
  const { access } = await run.openCluster()
  await keepPromises(access)
  const ports = {
    web: await freePort(),
    mailRelay: await freePort(),
    mailbox: await freePort(),
    mailboxWeb: await freePort(),
  }
  const world = { access, ports, secret: randomBytes(48).toString('base64'), database: DATABASE }
  await asClusterAdmin(access, (client) => prepareDatabase(client, DATABASE))
  const ownerUrl = clusterUrl(access, 'owner', DATABASE)
  await migrateDatabase(ownerUrl)

  const children = new Children(`${folder}/log`)
  run.onClose(() => children.stopAll())
  await startFakeMail({ root, children, folder: `${folder}/mail`, ports })
  const env = privateEnvironment(world)
  await startProduct({ root, children, env, port: ports.web })
  const web = pidOfWeb()
  return {
    base: env.BASE_URL,
    access: { ...env, DATABASE_OWNER_URL: ownerUrl },
    unexpectedEnd: children.unexpectedEnd,
    webMemory: () => memoryOf(web),
  }
}

/** Clusters of the tests may lose what was committed; what a receipt costs is measured where it is kept. */
async function keepPromises(access: ClusterAccess): Promise<void> {
  await asClusterAdmin(access, async (client) => {
    for (const setting of ['fsync', 'synchronous_commit', 'full_page_writes'])
      await client.query(`alter system set ${setting} = on`)
    await client.query('select pg_reload_conf()')
  })
}

/** Among our own children, which the web process calls by a title of its own. */
function pidOfWeb(): number {
  const found = readFileSync(`/proc/${process.pid}/task/${process.pid}/children`, 'utf8')
    .trim()
    .split(' ')
    .filter((pid) => /next-server|next start|bin\/next/.test(readFileSync(`/proc/${pid}/cmdline`, 'utf8')))
  if (found.length !== 1) throw new Error('the web process was not found among the children')
  return Number(found[0])
}

/** What the process holds in memory, with any that it has started. */
function memoryOf(pid: number): number {
  const own = /^VmRSS:\s+(\d+) kB$/m.exec(readFileSync(`/proc/${pid}/status`, 'utf8'))?.[1]
  const children = readdirSync(`/proc/${pid}/task`).flatMap((thread) =>
    readFileSync(`/proc/${pid}/task/${thread}/children`, 'utf8').split(' ').filter(Boolean).map(Number),
  )
  return children.reduce((sum, child) => sum + memoryOf(child), Number(own ?? 0) * 1024)
}
