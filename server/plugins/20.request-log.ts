import type { H3Event } from 'h3'
import { defineNitroPlugin } from 'nitropack/runtime'
import { logLine } from '../utils/log'
import { notesOf } from '../utils/request-context'

/** The pattern an address matched, not the address itself: that may hold what is nobody's business. */
function routeOf(event: H3Event): string {
  const matched: unknown = event.context.matchedRoute
  const path = typeof matched === 'object' && matched !== null && 'path' in matched ? matched.path : undefined
  return typeof path === 'string' ? path : 'unmatched'
}

function logRequest(event: H3Event, aborted: boolean): void {
  const notes = notesOf(event)
  if (notes.logged || event.path.startsWith('/_nuxt/')) return
  notes.logged = true
  const { statusCode } = event.node.res
  logLine(statusCode >= 500 ? 'error' : 'info', 'request', {
    requestId: notes.id,
    method: event.method,
    route: routeOf(event),
    status: statusCode,
    ms: Math.round((performance.now() - notes.startedAt) * 10) / 10,
    action: notes.action,
    code: notes.errorCode,
    shop: notes.shopId,
    user: notes.userId,
    aborted: aborted || undefined,
  })
}

/** One line for each request, also for one whose caller went away. */
export default defineNitroPlugin((nitro) => {
  nitro.hooks.hook('request', (event) => {
    notesOf(event)
    event.node.res.once('close', () => logRequest(event, !event.node.res.writableFinished))
  })
  nitro.hooks.hook('afterResponse', (event) => logRequest(event, false))
})
