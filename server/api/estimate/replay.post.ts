import { replay } from '#shared/heat'
import { ReplayRequestSchema } from '#shared/schemas/estimate'
import { defineComputeApi } from '../../utils/api'

export default defineComputeApi({
  action: 'estimate.run',
  body: ReplayRequestSchema,
  bodyLimitBytes: 8_000_000,
  compute: ({ body }) => replay(body),
})
