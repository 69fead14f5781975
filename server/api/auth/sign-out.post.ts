import { signOut } from '../../services/auth-service'
import { noContent } from '../../utils/answer'
import { definePublicApi } from '../../utils/api'
import { notesOf } from '../../utils/request-context'
import { readTokenHash, removeSessionCookie } from '../../utils/session-cookie'

export default definePublicApi({
  handler: async ({ event }) => {
    await signOut(await readTokenHash(event), notesOf(event).id)
    removeSessionCookie(event)
    return noContent()
  },
})
