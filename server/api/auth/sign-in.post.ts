import { getRequestHeader } from 'h3'
import { SignInSchema } from '#shared/schemas/auth'
import { signIn } from '../../services/auth-service'
import { ok } from '../../utils/answer'
import { definePublicApi } from '../../utils/api'
import { peerAddress } from '../../utils/peer'
import { notesOf } from '../../utils/request-context'
import { createToken, hashToken, readTokenHash, writeSessionCookie } from '../../utils/session-cookie'

export default definePublicApi({
  body: SignInSchema,
  handler: async ({ event, body }) => {
    const token = createToken()
    const me = await signIn(body, {
      peer: peerAddress(event),
      userAgent: (getRequestHeader(event, 'user-agent') ?? '').slice(0, 300),
      requestId: notesOf(event).id,
      tokenHash: hashToken(token),
      replacedTokenHash: await readTokenHash(event),
    })
    await writeSessionCookie(event, token)
    return ok(me)
  },
})
