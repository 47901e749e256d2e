import { fileURLToPath } from 'node:url'
import { asClusterAdmin, clusterUrl } from '@/lib/commands/cluster-access'
import { prepareDatabase } from '@/lib/commands/cluster-roles'
import { openThrowAwayCluster } from '@/lib/commands/private-cluster'
import { migrateDatabase } from './migrate-database'

const DATABASE = 'evenlot'

/** Runs the work against a throw-away database that holds the latest migration and nothing else. */
export async function withMigratedDatabase<T>(work: (ownerUrl: string) => Promise<T>): Promise<T> {
  const root = fileURLToPath(new URL('../..', import.meta.url))
  const cluster = await openThrowAwayCluster({ root, say: console.log })
  try {
    await asClusterAdmin(cluster.access, (client) => prepareDatabase(client, DATABASE))
    const ownerUrl = clusterUrl(cluster.access, 'owner', DATABASE)
    await migrateDatabase(ownerUrl)
    return await work(ownerUrl)
  } finally {
    await cluster.stop()
  }
}
