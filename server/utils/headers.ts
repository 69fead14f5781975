import type { H3Event } from 'h3'
import { setResponseHeader, setResponseHeaders } from 'h3'
import { publicAddress } from './public-address'

/** What every answer carries that is not a page: nothing may be embedded, run, guessed or kept. */
const API_HEADERS = {
  'cache-control': 'no-store',
  'content-security-policy':
    "default-src 'none'; frame-ancestors 'none'; base-uri 'none'; form-action 'none'",
  'cross-origin-resource-policy': 'same-origin',
  'referrer-policy': 'same-origin',
  'x-content-type-options': 'nosniff',
  'x-frame-options': 'DENY',
} as const

const ONE_YEAR_S = 31_536_000

/** Whether an address belongs to the API or the probes rather than to a page. */
export function isApiPath(path: string): boolean {
  return path === '/api' || path.startsWith('/api/') || path === '/livez' || path === '/readyz'
}

/** The headers of the API in one place; strict transport security for pages too, and only where the address is https. */
export function setSecurityHeaders(event: H3Event, isApi: boolean): void {
  if (isApi) setResponseHeaders(event, API_HEADERS)
  if (publicAddress().secure)
    setResponseHeader(event, 'strict-transport-security', `max-age=${ONE_YEAR_S}; includeSubDomains`)
}
