import type { H3Event } from 'h3'
import { setResponseHeader, setResponseStatus } from 'h3'
import { AppError, ERROR_TABLE, type ErrorBody } from '#shared/errors'
import { classifyFailure } from '../db/failures'
import { SessionRefused } from '../db/with-shop'
import { describeError, logLine } from './log'
import { notesOf } from './request-context'

/** What a handler gives back. */
export interface Reply {
  status: 200 | 201 | 204 | 503
  body?: object
  /** Version of the row in the body; becomes its ETag. */
  version?: number
}

export const ok = (body: object, version?: number): Reply => ({ status: 200, body, version })
export const created = (body: object, version?: number): Reply => ({ status: 201, body, version })
export const noContent = (): Reply => ({ status: 204 })

/** Any error as one of the table. What nobody expected becomes `internal`, and its cause goes to the log alone. */
function toAppError(error: unknown): AppError {
  if (error instanceof AppError) return error
  if (error instanceof SessionRefused) return new AppError('not_signed_in')
  const failure = classifyFailure(error)
  if (failure === 'unavailable') return new AppError('unavailable', { retryAfterS: 1, cause: error })
  if (failure === 'conflict') return new AppError('conflict', { cause: error })
  if (failure === 'bad_text')
    return new AppError('bad_input', {
      issues: [
        { path: 'body', message: 'holds a character that cannot be stored, such as NUL; take it out' },
      ],
      cause: error,
    })
  return new AppError('internal', { cause: error })
}

/** Sets the status and headers of an error answer and gives its body. */
export function answerError(event: H3Event, thrown: unknown): ErrorBody {
  const error = toAppError(thrown)
  const notes = notesOf(event)
  const { status } = ERROR_TABLE[error.code]
  const { issues, facts, retryAfterS, cause } = error.details
  notes.errorCode = error.code
  if (status >= 500)
    logLine('error', 'request_failed', {
      requestId: notes.id,
      code: error.code,
      cause: cause === undefined ? undefined : describeError(cause),
    })
  setResponseStatus(event, status)
  setResponseHeader(event, 'content-type', 'application/json')
  if (retryAfterS !== undefined) setResponseHeader(event, 'retry-after', retryAfterS)
  return {
    error: {
      ...facts,
      code: error.code,
      message: error.message,
      ...(issues === undefined ? {} : { issues }),
      requestId: notes.id,
    },
  }
}
