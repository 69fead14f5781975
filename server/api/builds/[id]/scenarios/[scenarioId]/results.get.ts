import { listResults } from '../../../../../services/result-service'
import { ok } from '../../../../../utils/answer'
import { defineShopApi } from '../../../../../utils/api'
import { ScenarioParamsSchema } from '../../../../../utils/params'

export default defineShopApi({
  action: 'result.read',
  params: ScenarioParamsSchema,
  handler: async (shop, { params }) =>
    ok({ results: await listResults(shop, { buildId: params.id, id: params.scenarioId }) }),
})
