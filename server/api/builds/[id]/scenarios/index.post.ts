import { ScenarioCreateSchema } from '#shared/schemas/scenario'
import { createScenario } from '../../../../services/scenario-service'
import { created } from '../../../../utils/answer'
import { defineShopApi } from '../../../../utils/api'
import { BuildParamsSchema } from '../../../../utils/params'

export default defineShopApi({
  action: 'scenario.create',
  creates: true,
  params: BuildParamsSchema,
  body: ScenarioCreateSchema,
  handler: async (shop, { params, body }) => {
    const scenario = await createScenario(shop, params.id, body)
    return created({ scenario }, scenario.version)
  },
})
