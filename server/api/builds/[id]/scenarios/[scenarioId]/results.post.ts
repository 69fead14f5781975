import { ResultCreateSchema } from '#shared/schemas/result'
import { createResult } from '../../../../../services/result-service'
import { created } from '../../../../../utils/answer'
import { defineShopApi } from '../../../../../utils/api'
import { ScenarioParamsSchema } from '../../../../../utils/params'

export default defineShopApi({
  action: 'result.create',
  creates: true,
  params: ScenarioParamsSchema,
  body: ResultCreateSchema,
  handler: async (shop, { params, body }) =>
    created({ result: await createResult(shop, { buildId: params.id, id: params.scenarioId }, body) }),
})
