import { defineNitroPlugin } from 'nitropack/runtime'
import { closeDatabase } from '../db/connection'
import { logLine } from '../utils/log'

/** After the last answer is out, the connections go, so that the process ends by itself. */
export default defineNitroPlugin((nitro) => {
  nitro.hooks.hook('close', async () => {
    await closeDatabase()
    logLine('info', 'closed')
  })
})
