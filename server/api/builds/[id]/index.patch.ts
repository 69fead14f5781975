import { BuildUpdateSchema } from '#shared/schemas/build'
import { changeBuild } from '../../../services/build-service'
import { ok } from '../../../utils/answer'
import { defineShopApi } from '../../../utils/api'
import { requireVersion } from '../../../utils/if-match'
import { BuildParamsSchema } from '../../../utils/params'

export default defineShopApi({
  action: 'build.update',
  params: BuildParamsSchema,
  body: BuildUpdateSchema,
  handler: async (shop, { event, params, body }) => {
    const answer = await changeBuild(shop, { id: params.id, version: requireVersion(event) }, body)
    return ok(answer, answer.build.version)
  },
})
