/**
 * zod tries whether it may compile code; the content security policy forbids it and would report the attempt. The setting
 * is `z.config({ jitless: true })`, made where zod will look for it: importing zod here would load it on every page, and a
 * page's own schemas ask as soon as they are loaded, so it has to be there before the router loads the first page.
 * tests/unit/utils/zod-without-eval.test.ts holds the pinned zod to this.
 */
export default defineNuxtPlugin({
  name: 'zod-without-eval',
  // Before the router, which comes with the framework's own early plugins.
  order: -50,
  setup() {
    const shared = globalThis as { __zod_globalConfig?: { jitless?: boolean } }
    shared.__zod_globalConfig = Object.assign(shared.__zod_globalConfig ?? {}, { jitless: true })
  },
})
