import { ERROR_TABLE } from '#shared/errors'
import type { ErrorBody, ErrorCode, ErrorIssue } from '#shared/errors'

/** The codes of the server's table, and two of our own for when no readable answer came. */
export type ApiErrorCode = ErrorCode | 'unreachable' | 'unreadable'

const OWN_MESSAGES = {
  unreachable: 'The server cannot be reached. What you typed is kept; check the connection and try again.',
  unreadable: 'The server gave an answer that cannot be read. What you typed is kept; try again shortly.',
} as const

/** An error answer of the API, typed. `status` is 0 when no answer came at all. */
export class ApiError extends Error {
  readonly status: number
  readonly code: ApiErrorCode
  /** Fields to mend, by path. */
  readonly issues: readonly ErrorIssue[]
  readonly requestId: string | null
  /** Whatever else the server says about it, such as the current version of a stale row. */
  readonly facts: Readonly<Record<string, unknown>>

  constructor(fields: {
    status: number
    code: ApiErrorCode
    message: string
    issues?: readonly ErrorIssue[]
    requestId?: string | null
    facts?: Readonly<Record<string, unknown>>
  }) {
    super(fields.message)
    this.name = 'ApiError'
    this.status = fields.status
    this.code = fields.code
    this.issues = fields.issues ?? []
    this.requestId = fields.requestId ?? null
    this.facts = fields.facts ?? {}
  }

  /** The message for a field, by its path; undefined when that field is fine. */
  issueAt(path: string): string | undefined {
    return this.issues.find((issue) => issue.path === path)?.message
  }
}

const isErrorCode = (code: unknown): code is ErrorCode =>
  typeof code === 'string' && Object.hasOwn(ERROR_TABLE, code)

/** Whether an answer is an error of our own server. Looked at by hand: this runs on every page, where zod does not. */
function isErrorBody(data: unknown): data is ErrorBody {
  const error: unknown = typeof data === 'object' && data !== null && 'error' in data ? data.error : undefined
  if (typeof error !== 'object' || error === null) return false
  const { code, message, requestId, issues } = error as Record<string, unknown>
  return (
    isErrorCode(code) &&
    typeof message === 'string' &&
    typeof requestId === 'string' &&
    (issues === undefined || Array.isArray(issues))
  )
}

/**
 * Turns whatever a request ended in into an ApiError.
 * @param caught - what `$fetch` threw: with `status` and `data` when there was an answer
 */
export function toApiError(caught: unknown): ApiError {
  if (caught instanceof ApiError) return caught
  const { status, data } = (typeof caught === 'object' && caught !== null ? caught : {}) as {
    status?: unknown
    data?: unknown
  }
  if (typeof status !== 'number' || status === 0)
    return new ApiError({ status: 0, code: 'unreachable', message: OWN_MESSAGES.unreachable })
  if (!isErrorBody(data))
    return new ApiError({ status, code: 'unreadable', message: OWN_MESSAGES.unreadable })
  const { code, message, issues, requestId, ...facts } = data.error
  return new ApiError({ status, code, message, issues, requestId, facts })
}
