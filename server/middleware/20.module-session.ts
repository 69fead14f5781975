import { defineEventHandler } from 'h3'
import { getMe } from '../services/auth-service'
import { ok } from '../utils/answer'
import { defineShopApi } from '../utils/api'

const answer = defineShopApi({
  action: 'profile.read',
  handler: async (shop) => ok({ user: getMe(shop).user }),
})

/**
 * The session module answers `/api/_auth/session` from the cookie alone, so that a cookie kept from before signing out
 * would still say who it was. Here the address asks the session table like every other call.
 */
export default defineEventHandler((event) => {
  if (event.path.split('?', 1)[0]?.replace(/\/$/, '') === '/api/_auth/session') return answer(event)
})
