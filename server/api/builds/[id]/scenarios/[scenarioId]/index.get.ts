import { getScenario } from '../../../../../services/scenario-service'
import { ok } from '../../../../../utils/answer'
import { defineShopApi } from '../../../../../utils/api'
import { ScenarioParamsSchema } from '../../../../../utils/params'

export default defineShopApi({
  action: 'scenario.read',
  params: ScenarioParamsSchema,
  handler: async (shop, { params }) => {
    const scenario = await getScenario(shop, { buildId: params.id, id: params.scenarioId })
    return ok({ scenario }, scenario.version)
  },
})
