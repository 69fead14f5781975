import pg from 'pg'

const INT8 = 20
const DATE = 1082
const NUMERIC = 1700

/** A bigint as a number, as long as a number can hold it: cents and counts do. */
function parseInt8(text: string): number {
  const value = Number(text)
  if (!Number.isSafeInteger(value))
    throw new RangeError('A bigint from the database is beyond what a number can hold.')
  return value
}

/**
 * How values come out of the database; the one place that says so. A `date` stays the text it is (as a Date it would
 * move by a day east of Greenwich), `numeric` stays text (a number would lose digits).
 */
export function installTypeParsers(): void {
  pg.types.setTypeParser(INT8, parseInt8)
  pg.types.setTypeParser(DATE, (text) => text)
  pg.types.setTypeParser(NUMERIC, (text) => text)
}
