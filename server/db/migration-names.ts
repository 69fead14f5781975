/** Every migration in its order, by the name it is stored under; a test holds this to the folder. `/readyz` asks for the last. */
export const MIGRATION_NAMES = [
  '20261201090000_create_ground.ts',
  '20261201090100_create_shops_and_people.ts',
  '20261201090200_create_sessions.ts',
  '20261201090300_create_customers_and_builds.ts',
  '20261201090400_create_results.ts',
  '20261201090500_create_coolers.ts',
  '20261201090600_create_audit_events.ts',
  '20261201090700_create_idempotency_keys.ts',
  '20261201090800_create_build_search.ts',
] as const
