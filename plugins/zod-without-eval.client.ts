import { z } from 'zod'

/** zod tries whether it may compile code; the content security policy forbids it and would report the attempt. */
export default defineNuxtPlugin({
  name: 'zod-without-eval',
  enforce: 'pre',
  setup() {
    z.config({ jitless: true })
  },
})
