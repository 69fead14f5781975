import { ok } from '../utils/answer'
import { definePublicApi } from '../utils/api'

/** The process runs. Nothing is asked of anything else, so that a slow database restarts nothing. */
export default definePublicApi({ handler: async () => ok({ status: 'ok' }) })
