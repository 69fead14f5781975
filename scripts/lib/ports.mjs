// @ts-check
import { randomInt } from 'node:crypto'
import { once } from 'node:events'
import { createServer } from 'node:net'

/**
 * Why nobody can listen there now: `EADDRINUSE` when taken, `EACCES` when not permitted; undefined when free.
 *
 * @param {number} port
 * @param {string} host
 * @returns {Promise<string | undefined>}
 */
export async function portProblem(port, host) {
  const server = createServer()
  try {
    server.listen({ port, host, exclusive: true })
    await once(server, 'listening')
    return undefined
  } catch (error) {
    return /** @type {NodeJS.ErrnoException} */ (error).code ?? 'unknown'
  } finally {
    server.close()
  }
}

/** The range for our own servers: below the ports that systems hand out to outgoing connections, away from defaults. */
export const PORT_RANGE = { lowest: 20_000, highest: 32_000 }

/**
 * The remembered port if it is free, else a free one taken at random.
 *
 * @param {{ remembered?: number, host?: string, problem?: typeof portProblem }} [options]
 */
export async function choosePort({ remembered, host = '127.0.0.1', problem = portProblem } = {}) {
  if (remembered !== undefined && (await problem(remembered, host)) === undefined) return remembered
  for (let attempt = 0; attempt < 200; attempt += 1) {
    const port = randomInt(PORT_RANGE.lowest, PORT_RANGE.highest + 1)
    if (port !== remembered && (await problem(port, host)) === undefined) return port
  }
  throw new Error(`no free port found between ${PORT_RANGE.lowest} and ${PORT_RANGE.highest} on ${host}`)
}

/**
 * Reads a port as a person sets it.
 *
 * @param {string | undefined} text
 * @param {number} fallback for one that is not set
 */
export function parsePort(text, fallback) {
  if (text === undefined || text.trim() === '') return fallback
  const port = /^\d{1,5}$/.test(text.trim()) ? Number(text) : 0
  if (port < 1 || port > 65_535) {
    throw new RangeError(`PORT is "${text}": it must be a whole number from 1 to 65535, such as ${fallback}`)
  }
  return port
}
