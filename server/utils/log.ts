export type LogLevel = 'info' | 'warn' | 'error'

/** What a line may carry besides time and level; never a password, a token, a cookie or a body. */
export type LogFields = Record<string, string | number | boolean | null | undefined>

/** One line of JSON to standard output, time in UTC. Line breaks in values are escaped by JSON itself. */
export function logLine(level: LogLevel, event: string, fields: LogFields = {}): void {
  process.stdout.write(`${JSON.stringify({ time: new Date().toISOString(), level, event, ...fields })}\n`)
}

/** An unexpected error as one field: what it is and where it came from, without what it was called with. */
export function describeError(error: unknown): string {
  if (!(error instanceof Error)) return String(error)
  const code = 'code' in error && typeof error.code === 'string' ? ` [${error.code}]` : ''
  const constraint =
    'constraint' in error && typeof error.constraint === 'string' ? ` (${error.constraint})` : ''
  const cause = error.cause === undefined ? '' : `; cause: ${describeError(error.cause)}`
  return `${error.stack ?? error.message}${code}${constraint}${cause}`
}
