import { randomBytes } from 'node:crypto'
import { migrateDatabase } from '@/db/commands/migrate-database'
import { Children } from '@/lib/commands/children'
import { asClusterAdmin, clusterUrl, type ClusterAccess } from '@/lib/commands/cluster-access'
import { prepareDatabase } from '@/lib/commands/cluster-roles'
import { freePort } from '@/lib/commands/free-port'
import { privateEnvironment } from '@/lib/commands/private-run'
import { ensureBuild } from '@/lib/commands/product-build'
import { startFakeMail, startProduct } from '@/lib/commands/product-processes'
import type { TestRun } from '@/lib/commands/test-run'
import { childrenOf, commandOf, memoryOf, parentOf } from './machine-use'

const DATABASE = 'load'

export interface LoadProduct {
  readonly base: string
  readonly access: Readonly<Record<'DATABASE_URL' | 'DATABASE_OWNER_URL' | 'AUTH_SECRET', string>>
  /** Which child ended though nobody asked it to, once one does. */
  readonly unexpectedEnd: Children['unexpectedEnd']
  /** What the web process holds in memory, in bytes. */
  webMemory(): number
  /** By the name that is printed. */
  readonly processes: Readonly<Record<string, number>>
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
  const processes = await findProcesses(access)
  return {
    base: env.BASE_URL,
    access: { ...env, DATABASE_OWNER_URL: ownerUrl },
    unexpectedEnd: children.unexpectedEnd,
    processes,
    webMemory: () => memoryOf(processes.web ?? 0),
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

/** Which process is which, among our own children and above a connection to the database. */
async function findProcesses(access: ClusterAccess): Promise<Record<string, number>> {
  const ours = childrenOf(process.pid)
  const named = (name: string, pattern: RegExp) => {
    const found = ours.filter((pid) => pattern.test(commandOf(pid)))
    if (found.length !== 1) throw new Error(`the ${name} process was not found among the children`)
    return Number(found[0])
  }
  const backend = await asClusterAdmin(access, async (client) => {
    const { rows } = await client.query<{ pid: number }>('select pg_backend_pid() as pid')
    return parentOf(rows[0]?.pid ?? 0)
  })
  return {
    // The framework gives its process a title of its own once it runs.
    web: named('web', /next-server|bin\/next/),
    worker: named('worker', /jobs\/worker/),
    PostgreSQL: backend,
    mail: named('mail', /fakes\/mail/),
  }
}
