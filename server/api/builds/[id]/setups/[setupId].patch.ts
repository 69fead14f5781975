import { SetupUpdateSchema } from '#shared/schemas/setup'
import { changeSetup } from '../../../../services/setup-service'
import { ok } from '../../../../utils/answer'
import { defineShopApi } from '../../../../utils/api'
import { requireVersion } from '../../../../utils/if-match'
import { SetupParamsSchema } from '../../../../utils/params'

export default defineShopApi({
  action: 'setup.update',
  params: SetupParamsSchema,
  body: SetupUpdateSchema,
  handler: async (shop, { event, params, body }) => {
    const at = { buildId: params.id, id: params.setupId, version: requireVersion(event) }
    const setup = await changeSetup(shop, at, body)
    return ok({ setup }, setup.version)
  },
})
