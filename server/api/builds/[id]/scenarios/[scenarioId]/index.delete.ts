import { removeScenario } from '../../../../../services/scenario-service'
import { noContent } from '../../../../../utils/answer'
import { defineShopApi } from '../../../../../utils/api'
import { requireVersion } from '../../../../../utils/if-match'
import { ScenarioParamsSchema } from '../../../../../utils/params'

export default defineShopApi({
  action: 'scenario.delete',
  params: ScenarioParamsSchema,
  handler: async (shop, { event, params }) => {
    await removeScenario(shop, { buildId: params.id, id: params.scenarioId, version: requireVersion(event) })
    return noContent()
  },
})
