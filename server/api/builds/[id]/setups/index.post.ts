import { SetupCreateSchema } from '#shared/schemas/setup'
import { createSetup } from '../../../../services/setup-service'
import { created } from '../../../../utils/answer'
import { defineShopApi } from '../../../../utils/api'
import { BuildParamsSchema } from '../../../../utils/params'

export default defineShopApi({
  action: 'setup.create',
  creates: true,
  params: BuildParamsSchema,
  body: SetupCreateSchema,
  handler: async (shop, { params, body }) => {
    const setup = await createSetup(shop, params.id, body)
    return created({ setup }, setup.version)
  },
})
