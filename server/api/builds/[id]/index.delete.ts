import { removeBuild } from '../../../services/build-service'
import { noContent } from '../../../utils/answer'
import { defineShopApi } from '../../../utils/api'
import { requireVersion } from '../../../utils/if-match'
import { BuildParamsSchema } from '../../../utils/params'

export default defineShopApi({
  action: 'build.delete',
  params: BuildParamsSchema,
  handler: async (shop, { event, params }) => {
    await removeBuild(shop, { id: params.id, version: requireVersion(event) })
    return noContent()
  },
})
