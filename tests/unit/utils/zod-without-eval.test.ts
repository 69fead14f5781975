import { expect, it } from 'vitest'

it('makes zod leave the compiler alone when set before zod is loaded, as the plugin does', async () => {
  Object.assign(globalThis, { __zod_globalConfig: { jitless: true } })
  const { z } = await import('zod')
  expect(z.config().jitless).toBe(true)
})
