/** What a failure of the database means for the request that met it. */
export type DatabaseFailure = 'unavailable' | 'conflict' | 'bad_text'

const UNAVAILABLE_STATES = new Set([
  '40001', // serialization failure
  '40P01', // deadlock
  '55P03', // lock not available
  '57014', // statement cancelled by its timeout
  '57P01', // shut down by an administrator
  '57P02', // crash shutdown
  '57P03', // cannot connect now
  '57P05', // idle session timeout
  '25P03', // idle in transaction timeout
  '3D000', // the database is not there
  '55000', // the database takes no connections
])
const NODE_CODES = new Set([
  'ECONNREFUSED',
  'ECONNRESET',
  'EPIPE',
  'ETIMEDOUT',
  'ENOTFOUND',
  'EAI_AGAIN',
  'EHOSTUNREACH',
])

/** The driver and the pool throw these without any code; the texts are theirs, not the database's. Knex puts the SQL in front. */
const CLIENT_MESSAGES = [
  'Query read timeout',
  'timeout expired',
  'Connection terminated',
  'Client has encountered a connection error',
  'Transaction query already complete',
  'Knex: Timeout acquiring a connection',
  'Unable to acquire a connection',
]

function codeOf(error: unknown): string | undefined {
  const code: unknown =
    typeof error === 'object' && error !== null && 'code' in error ? error.code : undefined
  return typeof code === 'string' ? code : undefined
}

/** Whether the connection itself is gone or hangs, so that not even ROLLBACK would come back from it. */
export function isConnectionLost(error: unknown): boolean {
  const code = codeOf(error)
  if (code !== undefined) return code.startsWith('08') || code.startsWith('57P') || NODE_CODES.has(code)
  return (
    error instanceof Error &&
    CLIENT_MESSAGES.some((text) => error.message.startsWith(text) || error.message.includes(` - ${text}`))
  )
}

/** Reads SQLSTATE and driver codes; undefined for what is not a failure of the database, or a mistake of ours. */
export function classifyFailure(error: unknown): DatabaseFailure | undefined {
  if (isConnectionLost(error)) return 'unavailable'
  const code = codeOf(error)
  if (code === undefined) return undefined
  if (UNAVAILABLE_STATES.has(code) || code.startsWith('53') || code.startsWith('28')) return 'unavailable'
  if (code === '23505' || code === '23503') return 'conflict'
  if (code === '22P05' || code === '22021') return 'bad_text'
  return undefined
}
