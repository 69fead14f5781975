/** What may be stored in a jsonb column: Knex would take a bare array for a PostgreSQL array, so all go as text. */
export function toJsonb(value: object): string {
  return JSON.stringify(value)
}

/** Drops the fields a partial change leaves out, so that they stay as they are. */
export function definedOnly<T extends object>(fields: T): Partial<T> {
  return Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== undefined)) as Partial<T>
}
