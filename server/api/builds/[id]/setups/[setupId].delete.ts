import { removeSetup } from '../../../../services/setup-service'
import { noContent } from '../../../../utils/answer'
import { defineShopApi } from '../../../../utils/api'
import { requireVersion } from '../../../../utils/if-match'
import { SetupParamsSchema } from '../../../../utils/params'

export default defineShopApi({
  action: 'setup.delete',
  params: SetupParamsSchema,
  handler: async (shop, { event, params }) => {
    await removeSetup(shop, { buildId: params.id, id: params.setupId, version: requireVersion(event) })
    return noContent()
  },
})
