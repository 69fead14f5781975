import { describe, expect, it } from 'vitest'
import { ApiError, toApiError } from '../../../utils/api-error'

const answer = (status: number, data: unknown) => Object.assign(new Error('fetch failed'), { status, data })

describe('toApiError', () => {
  it('keeps what the server says', () => {
    const error = toApiError(
      answer(412, {
        error: {
          code: 'stale_version',
          message: 'Somebody saved this after you opened it.',
          issues: [{ path: 'name', message: 'must not be empty' }],
          requestId: 'r-1',
          currentVersion: 7,
        },
      }),
    )
    expect(error).toBeInstanceOf(ApiError)
    expect(error).toMatchObject({
      status: 412,
      code: 'stale_version',
      requestId: 'r-1',
      facts: { currentVersion: 7 },
    })
    expect(error.issueAt('name')).toBe('must not be empty')
    expect(error.issueAt('stage')).toBeUndefined()
  })

  it('says that nobody answered', () => {
    for (const caught of [new TypeError('Failed to fetch'), null, 'gone', { status: 0 }])
      expect(toApiError(caught)).toMatchObject({ status: 0, code: 'unreachable' })
  })

  it('says that an answer cannot be read, and shows nothing of it', () => {
    const strange = [
      '<html>Bad gateway</html>',
      { error: 'no' },
      { error: { code: 'made_up', message: 'x', requestId: 'r' } },
    ]
    for (const data of strange) {
      const error = toApiError(answer(502, data))
      expect(error).toMatchObject({ status: 502, code: 'unreadable' })
      expect(error.message).not.toContain('Bad gateway')
    }
  })

  it('leaves an error of its own kind alone', () => {
    const error = new ApiError({ status: 401, code: 'not_signed_in', message: 'Sign in to go on.' })
    expect(toApiError(error)).toBe(error)
  })
})
