import { randomBytes } from 'node:crypto'
import { sql, type Kysely } from 'kysely'
import { inject } from 'vitest'
import { createDatabase } from '@/db/connection'
import type { DB } from '@/db/tables'
import { asClusterAdmin, clusterUrl, type ClusterAccess } from '@/lib/commands/cluster-access'
import { cloneMigratedDatabase } from './test-cluster'

export interface TestDatabase {
  /** The web's and the worker's login. */
  app: Kysely<DB>
  /** The anonymous login. */
  reader: Kysely<DB>
  /** For arranging what the product itself may not do; never for what is being tested. */
  owner: Kysely<DB>
  urls: { app: string; reader: string; owner: string }
  /** Stops the database's clock at an instant; null lets it run again. */
  setClock(instant: Date | string | null): Promise<void>
  destroy(): Promise<void>
}

/** A migrated database of the test file's own, cloned in a fraction of a second. */
export async function createTestDatabase(): Promise<TestDatabase> {
  const access = inject('testCluster') as ClusterAccess | undefined
  if (!access)
    throw new Error('No cluster here: only tests of the project "database" (vitest.config.ts) have one.')
  const name = `test_${randomBytes(6).toString('hex')}`
  await cloneMigratedDatabase(access, name)

  const urls = {
    app: clusterUrl(access, 'app', name),
    reader: clusterUrl(access, 'reader', name),
    owner: clusterUrl(access, 'owner', name),
  }
  const app = createDatabase(urls.app, { applicationName: 'test-app', max: 8 })
  const reader = createDatabase(urls.reader, { applicationName: 'test-reader', max: 2 })
  const owner = createDatabase(urls.owner, { applicationName: 'test-owner', max: 2 })
  return {
    app,
    reader,
    owner,
    urls,
    setClock: async (instant) => {
      await sql`select set_clock(${instant}::timestamptz, ${instant !== null})`.execute(owner)
    },
    destroy: async () => {
      await Promise.all([app.destroy(), reader.destroy(), owner.destroy()])
      await asClusterAdmin(access, (client) => client.query(`drop database "${name}" with (force)`))
    },
  }
}
