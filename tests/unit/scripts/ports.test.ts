import { once } from 'node:events'
import { createServer } from 'node:net'
import type { AddressInfo } from 'node:net'
import { describe, expect, it } from 'vitest'
import { choosePort, parsePort, PORT_RANGE, portProblem } from '../../../scripts/lib/ports.mjs'

describe('the choice of a port', () => {
  it('tells a taken port from a free one', async () => {
    const server = createServer().listen(0, '127.0.0.1')
    await once(server, 'listening')
    const { port } = server.address() as AddressInfo
    expect(await portProblem(port, '127.0.0.1')).toBe('EADDRINUSE')
    server.close()
    await once(server, 'close')
    expect(await portProblem(port, '127.0.0.1')).toBeUndefined()
  })

  it('keeps the remembered port while it is free', async () => {
    expect(await choosePort({ remembered: 21_234, problem: async () => undefined })).toBe(21_234)
  })

  it('leaves the remembered port when it is taken, for one in the range', async () => {
    const taken = 21_234
    const port = await choosePort({
      remembered: taken,
      problem: async (candidate) => (candidate === taken ? 'EADDRINUSE' : undefined),
    })
    expect(port).not.toBe(taken)
    expect(port).toBeGreaterThanOrEqual(PORT_RANGE.lowest)
    expect(port).toBeLessThanOrEqual(PORT_RANGE.highest)
  })

  it('gives up with a reason when nothing is free', async () => {
    await expect(choosePort({ problem: async () => 'EADDRINUSE' })).rejects.toThrow(/no free port/)
  })

  it('reads a port as a person sets it', () => {
    expect(parsePort(undefined, 3000)).toBe(3000)
    expect(parsePort('', 3000)).toBe(3000)
    expect(parsePort(' 8080 ', 3000)).toBe(8080)
  })

  it.each(['0', '65536', '80a', '-1', '3e3', '1.5'])('refuses %s and says what would do', (text) => {
    expect(() => parsePort(text, 3000)).toThrow(/PORT is .* from 1 to 65535, such as 3000/)
  })
})
