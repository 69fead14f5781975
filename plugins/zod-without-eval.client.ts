/**
 * zod tries whether it may compile code; the content security policy forbids it and would report the attempt. The setting
 * is `z.config({ jitless: true })`, made where zod will look for it: importing zod here would load it on every page.
 * tests/unit/utils/zod-without-eval.test.ts holds the pinned zod to this.
 */
export default defineNuxtPlugin({
  name: 'zod-without-eval',
  enforce: 'pre',
  setup() {
    Object.assign(globalThis, { __zod_globalConfig: { jitless: true } })
  },
})
