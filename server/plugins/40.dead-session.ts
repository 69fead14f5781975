import { appendResponseHeader, getResponseHeader, setResponseStatus } from 'h3'
import { defineNitroPlugin } from 'nitropack/runtime'
import { isApiPath } from '../utils/headers'
import { hasSessionCookie, removeSessionCookie } from '../utils/session-cookie'

/**
 * A page asked for with the cookie of an ended session is refused as such (401), not merely sent elsewhere; the body
 * still leads a browser to the sign-in, and the dead cookie goes. Whoever never had a session is redirected plainly.
 */
export default defineNitroPlugin((nitro) => {
  nitro.hooks.hook('beforeResponse', (event) => {
    if (event.node.res.statusCode !== 302 || isApiPath(event.path) || !hasSessionCookie(event)) return
    if (!String(getResponseHeader(event, 'location') ?? '').startsWith('/sign-in')) return
    setResponseStatus(event, 401)
    appendResponseHeader(event, 'cache-control', 'no-store')
    removeSessionCookie(event)
  })
})
