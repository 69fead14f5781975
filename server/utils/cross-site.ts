import type { H3Event } from 'h3'
import { getRequestHeader } from 'h3'
import { AppError } from '#shared/errors'
import { publicAddress } from './public-address'
import { hasSessionCookie } from './session-cookie'

function isOwnOrigin(event: H3Event, origin: string): boolean {
  const { origin: own, secure } = publicAddress()
  if (own !== undefined && origin === own) return true
  // Over https only the published address counts; on a workshop's own network any name of the machine will do, and a
  // browser never lets a page choose the Host header.
  return !secure && URL.canParse(origin) && new URL(origin).host === getRequestHeader(event, 'host')
}

/**
 * Refuses a writing request that another site could have made the browser send: by its Origin, by what the browser says
 * of its site, by a content type a form could send, or by a session cookie without either word from the browser.
 */
export function requireSameSite(event: H3Event): void {
  const origin = getRequestHeader(event, 'origin')
  const site = getRequestHeader(event, 'sec-fetch-site')
  const type = getRequestHeader(event, 'content-type')
  if (origin !== undefined && !isOwnOrigin(event, origin)) throw new AppError('cross_site')
  if (site !== undefined && site !== 'same-origin' && site !== 'none') throw new AppError('cross_site')
  if (origin === undefined && site === undefined && hasSessionCookie(event)) throw new AppError('cross_site')
  const hasBody =
    getRequestHeader(event, 'transfer-encoding') !== undefined ||
    Number(getRequestHeader(event, 'content-length') ?? 0) > 0
  const isJson = type !== undefined && /^application\/json\s*(;|$)/i.test(type)
  if ((type !== undefined || hasBody) && !isJson)
    throw new AppError('cross_site', {
      message: 'This call takes JSON only (content-type: application/json).',
    })
}
