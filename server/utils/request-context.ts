import { randomUUID } from 'node:crypto'
import type { H3Event } from 'h3'

interface RequestNotes {
  id: string
  startedAt: number
  shopId?: string
  userId?: string
  action?: string
  errorCode?: string
  logged: boolean
}

declare module 'h3' {
  interface H3EventContext {
    request?: RequestNotes
  }
}

/** What is known of a request besides its input: its id (made here, never taken from outside), its start, who asks. */
export function notesOf(event: H3Event): RequestNotes {
  event.context.request ??= { id: randomUUID(), startedAt: performance.now(), logged: false }
  return event.context.request
}
