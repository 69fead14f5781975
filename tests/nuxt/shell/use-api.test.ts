import { mountSuspended, registerEndpoint } from '@nuxt/test-utils/runtime'
import { getHeader, readBody, setResponseStatus } from 'h3'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { useApi } from '~/composables/use-api'
import { useSessionStore } from '~/stores/session'
import { ApiError } from '~/utils/api-error'

let signedIn = true
const seen: { ifMatch: string | undefined; key: string | undefined; body: unknown }[] = []

registerEndpoint('/api/probe', {
  method: 'PATCH',
  handler: async (event) => {
    seen.push({
      ifMatch: getHeader(event, 'if-match'),
      key: getHeader(event, 'idempotency-key'),
      body: await readBody(event),
    })
    if (signedIn) return { saved: true }
    setResponseStatus(event, 401)
    return { error: { code: 'not_signed_in', message: 'Sign in to go on.', requestId: 'r-1' } }
  },
})
registerEndpoint('/api/broken', (event) => {
  setResponseStatus(event, 500)
  return '<pre>a secret of the server</pre>'
})

/** The function as a component gets it. */
async function setup() {
  let api: ReturnType<typeof useApi> | undefined
  await mountSuspended({
    setup() {
      api = useApi()
      return () => null
    },
  })
  if (!api) throw new Error('setup did not run')
  return api
}

beforeEach(() => {
  signedIn = true
  seen.length = 0
})
afterEach(() => useSessionStore().settle(false))

describe('useApi', () => {
  it('sends the version and the key where they are given', async () => {
    const api = await setup()
    const answer = await api('/api/probe', {
      method: 'PATCH',
      body: { name: 'Wagon' },
      version: 7,
      idempotencyKey: 'k-1',
    })
    expect(answer).toEqual({ saved: true })
    expect(seen).toEqual([{ ifMatch: '"7"', key: 'k-1', body: { name: 'Wagon' } }])
  })

  it('asks for a sign-in when the session has ended, and then sends the same again', async () => {
    const api = await setup()
    const session = useSessionStore()
    signedIn = false
    const answer = api('/api/probe', { method: 'PATCH', body: { name: 'Wagon' } })
    await vi.waitFor(() => expect(session.asking).toBe(true))
    signedIn = true
    session.settle(true)
    expect(await answer).toEqual({ saved: true })
    expect(session.asking).toBe(false)
    expect(seen.map(({ body }) => body)).toEqual([{ name: 'Wagon' }, { name: 'Wagon' }])
  })

  it('hands the refusal on when nobody signs in', async () => {
    const api = await setup()
    const session = useSessionStore()
    signedIn = false
    const answer = api('/api/probe', { method: 'PATCH', body: {} })
    await vi.waitFor(() => expect(session.asking).toBe(true))
    session.settle(false)
    await expect(answer).rejects.toMatchObject({ status: 401, code: 'not_signed_in' })
    expect(seen).toHaveLength(1)
  })

  it('does not ask where a 401 is an answer', async () => {
    const api = await setup()
    signedIn = false
    await expect(api('/api/probe', { method: 'PATCH', body: {}, anonymous: true })).rejects.toBeInstanceOf(
      ApiError,
    )
    expect(useSessionStore().asking).toBe(false)
  })

  it('turns whatever goes wrong into an ApiError that gives nothing away', async () => {
    const api = await setup()
    const error = await api('/api/broken').catch((caught: unknown) => caught)
    expect(error).toBeInstanceOf(ApiError)
    expect((error as ApiError).message).not.toContain('secret')
  })
})
