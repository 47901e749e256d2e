import { fileURLToPath } from 'node:url'
import type { TestProject } from 'vitest/node'
import type { ClusterAccess } from '@/lib/commands/cluster-access'
import { openThrowAwayCluster } from '@/lib/commands/private-cluster'

declare module 'vitest' {
  interface ProvidedContext {
    testCluster: ClusterAccess | undefined
  }
}

/** Gives the database tests a cluster: the one whose access TEST_CLUSTER holds, or a throw-away one. */
export default async function provideCluster(project: TestProject) {
  if (process.env.TEST_CLUSTER) {
    project.provide('testCluster', JSON.parse(process.env.TEST_CLUSTER) as ClusterAccess)
    return
  }
  const root = fileURLToPath(new URL('../..', import.meta.url))
  const cluster = await openThrowAwayCluster({ root, say: (line) => process.stderr.write(`${line}\n`) })
  project.provide('testCluster', cluster.access)
  return () => cluster.stop()
}
