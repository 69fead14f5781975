import type { Me } from '../../shared/schemas/auth'

/** The people of the demo data, by what they are. */
export const DEMO_PEOPLE = {
  owner: 'owner@longpull.test',
  estimator: 'estimator@longpull.test',
  technician: 'technician@longpull.test',
  customer: 'customer@longpull.test',
  otherOwner: 'owner@othershop.test',
} as const

export type DemoPerson = keyof typeof DEMO_PEOPLE

export const DEMO_PASSWORD = 'longpull-demo'

export interface SignedIn {
  me: Me
  /** For a Cookie header. */
  cookie: string
  /** For a browser context. */
  cookies: { name: string; value: string; url: string }[]
  /** A call as this person's browser would make it: cookie, own origin, JSON in and out. */
  call: (
    method: string,
    path: string,
    options?: { body?: unknown; headers?: Record<string, string> },
  ) => Promise<Answer>
}

export interface Answer<Body = unknown> {
  status: number
  headers: Headers
  text: string
  /** The parsed body; undefined for an empty one or one that is not JSON. */
  body: Body
}

/** Signs a person of the demo data in. */
export async function signIn(app: { baseUrl: string }, person: DemoPerson): Promise<SignedIn> {
  const answer = await callApi(app, 'POST', '/api/auth/sign-in', {
    body: { email: DEMO_PEOPLE[person], password: DEMO_PASSWORD },
  })
  if (answer.status !== 200) throw new Error(`signing ${person} in: ${answer.status} ${answer.text}`)
  const pairs = answer.headers.getSetCookie().map((line) => line.split(';')[0] ?? '')
  const cookie = pairs.join('; ')
  return {
    me: answer.body as Me,
    cookie,
    cookies: pairs.map((pair) => ({
      name: pair.slice(0, pair.indexOf('=')),
      value: pair.slice(pair.indexOf('=') + 1),
      url: app.baseUrl,
    })),
    call: (method, path, options = {}) =>
      callApi(app, method, path, { ...options, headers: { cookie, ...options.headers } }),
  }
}

/** A call of the API from the application's own pages, signed in only when the headers say so. */
export async function callApi(
  app: { baseUrl: string },
  method: string,
  path: string,
  options: { body?: unknown; headers?: Record<string, string> } = {},
): Promise<Answer> {
  const response = await fetch(`${app.baseUrl}${path}`, {
    method,
    redirect: 'manual',
    headers: {
      origin: app.baseUrl,
      ...(options.body === undefined ? {} : { 'content-type': 'application/json' }),
      ...options.headers,
    },
    body: options.body === undefined ? undefined : JSON.stringify(options.body),
  })
  const text = await response.text()
  const isJson = response.headers.get('content-type')?.includes('json') === true && text !== ''
  return {
    status: response.status,
    headers: response.headers,
    text,
    body: isJson ? JSON.parse(text) : undefined,
  }
}
