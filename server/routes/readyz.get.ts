import { isDatabaseReady } from '../db/health'
import { definePublicApi } from '../utils/api'

/** The process can serve: the database answers within a second and has every migration this build knows. */
export default definePublicApi({
  handler: async () => {
    const ready = await isDatabaseReady()
    return { status: ready ? 200 : 503, body: { status: ready ? 'ok' : 'not ready' } }
  },
})
