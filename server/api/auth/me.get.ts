import { getMe } from '../../services/auth-service'
import { ok } from '../../utils/answer'
import { defineShopApi } from '../../utils/api'

export default defineShopApi({ action: 'profile.read', handler: async (shop) => ok(getMe(shop)) })
