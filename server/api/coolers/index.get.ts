import { listCatalogue } from '../../services/cooler-service'
import { ok } from '../../utils/answer'
import { defineShopApi } from '../../utils/api'

export default defineShopApi({
  action: 'cooler.read',
  handler: async (shop) => ok({ coolers: await listCatalogue(shop) }),
})
