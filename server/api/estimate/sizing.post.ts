import { sizing } from '#shared/heat'
import { SizingRequestSchema } from '#shared/schemas/estimate'
import { defineComputeApi } from '../../utils/api'

export default defineComputeApi({
  action: 'estimate.run',
  body: SizingRequestSchema,
  compute: ({ body }) => sizing(body),
})
