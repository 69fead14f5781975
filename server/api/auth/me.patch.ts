import { MeUpdateSchema } from '#shared/schemas/auth'
import { updateMe } from '../../services/auth-service'
import { ok } from '../../utils/answer'
import { defineShopApi } from '../../utils/api'

export default defineShopApi({
  action: 'profile.update',
  body: MeUpdateSchema,
  handler: async (shop, { body }) => ok(await updateMe(shop, body)),
})
