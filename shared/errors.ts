/**
 * Every error code of the program, its HTTP status and the sentence a person may read. Code throws
 * `AppError(code, details)`; only this file maps codes to statuses. Messages say what to do next and never carry a cause.
 */
export const ERROR_TABLE = {
  // 400: the request itself
  bad_input: {
    status: 400,
    message: 'Some fields need another value. Each is named below with what would do.',
  },
  bad_json: {
    status: 400,
    message: 'The request is not valid JSON. Send an object with the fields of this call.',
  },
  // 401 / 403 / 404
  not_signed_in: { status: 401, message: 'Sign in to go on. What you typed is still here.' },
  wrong_credentials: { status: 401, message: 'E-mail or password is not right. Check both and try again.' },
  not_allowed: {
    status: 403,
    message: 'Your role in this shop does not include this. Ask the owner of the shop.',
  },
  cross_site: {
    status: 403,
    message: 'This request came from another site. Open Longpull itself and try again.',
  },
  not_found: { status: 404, message: 'There is nothing at this address, or it belongs to another shop.' },
  method_not_allowed: { status: 405, message: 'This address does not take that kind of request.' },
  // 409 / 412 / 413 / 428 / 429
  conflict: {
    status: 409,
    message: 'This cannot be done in the state it is in now. Load it again and look.',
  },
  stale_version: {
    status: 412,
    message: 'Somebody saved this after you opened it. Your typing is kept; load the newer one and compare.',
  },
  body_too_large: { status: 413, message: 'The request is larger than this call takes.' },
  version_missing: { status: 428, message: 'Say which version you are changing (If-Match).' },
  too_many_requests: { status: 429, message: 'Too many requests at once. Wait a moment and try again.' },
  // 422: the model refuses
  cannot_climb_grade: { status: 422, message: 'cannot climb this grade' },
  cannot_pull_away: { status: 422, message: 'cannot pull away on this grade' },
  cannot_hold_cruise: { status: 422, message: 'cannot hold the cruise speed between stops' },
  rating_impossible: { status: 422, message: 'rating is beyond what its air and oil flow can carry' },
  no_single_cooler: { status: 422, message: 'no single cooler of this kind holds the target' },
  model_refuses: { status: 422, message: 'The model has no answer for these inputs.' },
  idempotency_key_reused: {
    status: 422,
    message: 'This key was already used for another request. Use a new one.',
  },
  // 5xx
  internal: { status: 500, message: 'Something went wrong on our side. Nothing was saved; try again.' },
  unavailable: {
    status: 503,
    message: 'The database does not answer right now. Your typing is kept; try again shortly.',
  },
} as const satisfies Record<string, { status: number; message: string }>

export type ErrorCode = keyof typeof ERROR_TABLE

/** One field that needs another value: its path (`build.vehicle.massKg`) and what would do. */
export interface ErrorIssue {
  path: string
  message: string
}

export interface ErrorDetails {
  /** Fields to mend, by path. */
  issues?: ErrorIssue[]
  /** Replaces the table's sentence; safe to show. */
  message?: string
  /** Seconds after which a retry makes sense (429, 503). */
  retryAfterS?: number
  /** For the log only; never in an answer. */
  cause?: unknown
  /** Facts a caller may use, such as the current version of a stale row; part of the answer. */
  facts?: Record<string, string | number | boolean>
}

/** The body of every error answer. */
export interface ErrorBody {
  error: {
    code: ErrorCode
    message: string
    issues?: ErrorIssue[]
    requestId: string
    [fact: string]: unknown
  }
}

/** The one error the program throws on purpose. */
export class AppError extends Error {
  readonly code: ErrorCode
  readonly details: ErrorDetails

  constructor(code: ErrorCode, details: ErrorDetails = {}) {
    super(details.message ?? ERROR_TABLE[code].message, { cause: details.cause })
    this.name = 'AppError'
    this.code = code
    this.details = details
  }

  get status(): number {
    return ERROR_TABLE[this.code].status
  }
}
