import { sweep } from '#shared/heat'
import { SweepRequestSchema } from '#shared/schemas/estimate'
import { defineComputeApi } from '../../utils/api'

export default defineComputeApi({
  action: 'estimate.run',
  body: SweepRequestSchema,
  compute: ({ body }) => sweep(body),
})
