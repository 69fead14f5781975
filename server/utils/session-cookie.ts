import { createHash, randomBytes, randomUUID } from 'node:crypto'
import type { H3Event, SessionConfig } from 'h3'
import { deleteCookie, getCookie, unsealSession, updateSession } from 'h3'
import { publicAddress } from './public-address'

/** No session lives longer; the database says the same. */
const LONGEST_S = 12 * 60 * 60

type CookieConfig = SessionConfig & { name: string; cookie: { secure: boolean } }

/** `__Host-` binds the cookie to this very host over https; on plain http a browser would refuse such a name. */
function cookieConfig(): CookieConfig {
  const { secure } = publicAddress()
  return {
    name: secure ? '__Host-longpull' : 'longpull',
    password: process.env.NUXT_SESSION_PASSWORD ?? '',
    maxAge: LONGEST_S,
    // A session comes by cookie only: a header would slip past SameSite and the origin check.
    sessionHeader: false,
    cookie: { path: '/', httpOnly: true, sameSite: 'lax', secure },
  }
}

export function hashToken(token: string): Buffer {
  return createHash('sha256').update(token).digest()
}

/** A new session's secret: 256 bits from the system's generator. */
export function createToken(): string {
  return randomBytes(32).toString('base64url')
}

/** Whether the request carries a session cookie at all, live or not. */
export function hasSessionCookie(event: H3Event): boolean {
  return getCookie(event, cookieConfig().name) !== undefined
}

/** Hash of the session token the cookie holds; undefined without a cookie, or with one this installation never sealed. */
export async function readTokenHash(event: H3Event): Promise<Buffer | undefined> {
  const config = cookieConfig()
  const sealed = getCookie(event, config.name)
  if (sealed === undefined || sealed === '') return undefined
  try {
    const { data } = await unsealSession(event, config, sealed)
    const secure: unknown = data?.secure
    if (typeof secure !== 'object' || secure === null || !('token' in secure)) return undefined
    return typeof secure.token === 'string' ? hashToken(secure.token) : undefined
  } catch {
    return undefined
  }
}

/** Gives the browser a cookie for a new session. Nothing of a former cookie is carried over, not even its age. */
export async function writeSessionCookie(event: H3Event, token: string): Promise<void> {
  const config = cookieConfig()
  event.context.sessions = { [config.name]: { id: randomUUID(), createdAt: Date.now(), data: {} } }
  await updateSession<{ secure: { token: string } }>(event, config, { secure: { token } })
}

export function removeSessionCookie(event: H3Event): void {
  const { name, cookie } = cookieConfig()
  deleteCookie(event, name, cookie)
}
