import { createProgress } from '../../scripts/lib/progress.mjs'
import { startThrowawayCluster } from '../../scripts/lib/own-database.mjs'
import { CLUSTER_VARIABLES } from './cluster'

/**
 * Runs once before the tests that need PostgreSQL. `npm test` has a cluster up already; a developer who runs vitest
 * itself gets one here.
 */
export default async function setupCluster(): Promise<(() => Promise<void>) | undefined> {
  if (process.env[CLUSTER_VARIABLES.admin] !== undefined) return undefined
  const cluster = await startThrowawayCluster({ progress: createProgress() })
  for (const role of ['admin', 'owner', 'app', 'backup'] as const)
    process.env[CLUSTER_VARIABLES[role]] = cluster.url(role, 'postgres')
  return () => cluster.stop()
}
