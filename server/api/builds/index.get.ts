import { BuildListQuerySchema } from '#shared/schemas/build'
import { listBuildPage } from '../../services/build-service'
import { ok } from '../../utils/answer'
import { defineShopApi } from '../../utils/api'

export default defineShopApi({
  action: 'build.read',
  query: BuildListQuerySchema,
  handler: async (shop, { query }) => ok(await listBuildPage(shop, query)),
})
