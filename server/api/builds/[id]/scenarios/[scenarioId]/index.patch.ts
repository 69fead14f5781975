import { ScenarioUpdateSchema } from '#shared/schemas/scenario'
import { changeScenario } from '../../../../../services/scenario-service'
import { ok } from '../../../../../utils/answer'
import { defineShopApi } from '../../../../../utils/api'
import { requireVersion } from '../../../../../utils/if-match'
import { ScenarioParamsSchema } from '../../../../../utils/params'

export default defineShopApi({
  action: 'scenario.update',
  params: ScenarioParamsSchema,
  body: ScenarioUpdateSchema,
  handler: async (shop, { event, params, body }) => {
    const at = { buildId: params.id, id: params.scenarioId, version: requireVersion(event) }
    const scenario = await changeScenario(shop, at, body)
    return ok({ scenario }, scenario.version)
  },
})
