import { BuildCreateSchema } from '#shared/schemas/build'
import { createBuild } from '../../services/build-service'
import { created } from '../../utils/answer'
import { defineShopApi } from '../../utils/api'

export default defineShopApi({
  action: 'build.create',
  creates: true,
  body: BuildCreateSchema,
  handler: async (shop, { body }) => {
    const answer = await createBuild(shop, body)
    return created(answer, answer.build.version)
  },
})
