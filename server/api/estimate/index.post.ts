import { estimate } from '#shared/heat'
import { EstimateQuerySchema, EstimateRequestSchema } from '#shared/schemas/estimate'
import { defineComputeApi } from '../../utils/api'

export default defineComputeApi({
  action: 'estimate.run',
  query: EstimateQuerySchema,
  body: EstimateRequestSchema,
  compute: ({ query, body }) => estimate(body, query.step === undefined ? {} : { stepS: Number(query.step) }),
})
