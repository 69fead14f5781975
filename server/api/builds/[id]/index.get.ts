import { getBuild } from '../../../services/build-service'
import { ok } from '../../../utils/answer'
import { defineShopApi } from '../../../utils/api'
import { BuildParamsSchema } from '../../../utils/params'

export default defineShopApi({
  action: 'build.read',
  params: BuildParamsSchema,
  handler: async (shop, { params }) => {
    const answer = await getBuild(shop, params.id)
    return ok(answer, answer.build.version)
  },
})
