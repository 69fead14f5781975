/** The variables in which the run's throw-away cluster is handed to the tests: one address a role. */
export const CLUSTER_VARIABLES = {
  admin: 'LONGPULL_TEST_ADMIN_URL',
  owner: 'LONGPULL_TEST_OWNER_URL',
  app: 'LONGPULL_TEST_APP_URL',
  backup: 'LONGPULL_TEST_BACKUP_URL',
} as const

export type ClusterRole = keyof typeof CLUSTER_VARIABLES

/** The address of a database of the run's cluster for one of its roles. */
export function clusterUrl(role: ClusterRole, database: string): string {
  const base = process.env[CLUSTER_VARIABLES[role]]
  if (base === undefined) {
    throw new Error(
      `${CLUSTER_VARIABLES[role]} is not set: this test runs in the projects db, api or browser`,
    )
  }
  const url = new URL(base)
  url.pathname = `/${database}`
  return url.href
}
