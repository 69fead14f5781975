import { isDatabaseUp } from '../db/health'
import { definePublicApi } from '../utils/api'

export default definePublicApi({
  handler: async () => {
    const up = await isDatabaseUp()
    return {
      status: up ? 200 : 503,
      body: { status: up ? 'ok' : 'down', process: 'ok', database: up ? 'ok' : 'down' },
    }
  },
})
