import { useSessionStore } from '~/stores/session'
import { toApiError } from '~/utils/api-error'

export interface ApiOptions {
  method?: 'GET' | 'POST' | 'PATCH' | 'PUT' | 'DELETE'
  body?: object
  query?: Record<string, string | number | undefined>
  /** The version that is changed or deleted; sent as If-Match. */
  version?: number
  /** Lets the same request be sent again without doing it twice. */
  idempotencyKey?: string
  signal?: AbortSignal
  /** For the session itself: a 401 is an answer here, not a reason to ask for a sign-in. */
  anonymous?: boolean
}

/**
 * Calls our own API. On the server it passes the visitor's cookies on. Whatever goes wrong is thrown as an ApiError. When
 * the session has ended in the meantime, it asks for a sign-in over the page, so that nothing typed is lost, and then
 * sends the same request again.
 *
 * Call it in setup; the function it returns can be called at any time.
 */
export function useApi() {
  const request = useRequestFetch()
  const session = useSessionStore()

  async function send<Answer>(path: string, options: ApiOptions): Promise<Answer> {
    const headers: Record<string, string> = {}
    if (options.version !== undefined) headers['if-match'] = `"${options.version}"`
    if (options.idempotencyKey !== undefined) headers['idempotency-key'] = options.idempotencyKey
    try {
      return (await request(path, {
        method: options.method ?? 'GET',
        body: options.body,
        query: options.query,
        signal: options.signal,
        headers,
        retry: 0,
      })) as Answer
    } catch (caught) {
      // A request that its own caller called off is not a failure of the server.
      if (options.signal?.aborted) throw caught
      throw toApiError(caught)
    }
  }

  return async function api<Answer>(path: string, options: ApiOptions = {}): Promise<Answer> {
    try {
      return await send<Answer>(path, options)
    } catch (caught) {
      const error = caught instanceof Error ? caught : toApiError(caught)
      const sessionEnded = 'code' in error && error.code === 'not_signed_in'
      if (!sessionEnded || options.anonymous || import.meta.server) throw error
      if (!(await session.askForSignIn())) throw error
      return send<Answer>(path, options)
    }
  }
}
