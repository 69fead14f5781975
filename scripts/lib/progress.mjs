// @ts-check
import { performance } from 'node:perf_hooks'

/**
 * Says what is going on, one line a step with the seconds since the start, and something at least every ten seconds
 * while a step lasts, so that a first start of minutes never looks hung.
 *
 * @typedef {ReturnType<typeof createProgress>} Progress
 * @param {{ write?: (line: string) => void, now?: () => number, heartbeatMs?: number }} [options]
 */
export function createProgress(options = {}) {
  const write = options.write ?? ((line) => void process.stdout.write(`${line}\n`))
  const now = options.now ?? (() => performance.now())
  const heartbeatMs = options.heartbeatMs ?? 10_000
  const begin = now()
  const elapsed = () => `${((now() - begin) / 1000).toFixed(1)} s`

  /** @param {string} text */
  const say = (text) => write(`[${elapsed().padStart(8)}] ${text}`)

  /**
   * @template T
   * @param {string} title what is being done, as a person would say it
   * @param {(report: (line: string) => void) => Promise<T>} work gets a function for the latest line of detail
   * @returns {Promise<T>}
   */
  async function step(title, work) {
    const stepBegin = now()
    const seconds = () => `${((now() - stepBegin) / 1000).toFixed(1)} s`
    let latest = ''
    say(`${title} …`)
    const heartbeat = setInterval(
      () => say(`${title}: still at it after ${seconds()}${latest === '' ? '' : `: ${latest}`}`),
      heartbeatMs,
    )
    try {
      const result = await work((line) => {
        const text = cleanLine(line)
        if (text !== '') latest = text
      })
      say(`${title}: done in ${seconds()}`)
      return result
    } catch (error) {
      say(`${title}: failed after ${seconds()}`)
      throw error
    } finally {
      clearInterval(heartbeat)
    }
  }

  return { say, step, write, elapsed }
}

/**
 * One line of a program's output made fit for a progress line: no color codes, no control characters, not too long.
 *
 * @param {string} line
 */
export function cleanLine(line) {
  const plain = line
    .replace(new RegExp(`${String.fromCharCode(27)}\\[[0-9;?]*[A-Za-z]`, 'g'), '')
    .replace(/\p{Cc}+/gu, ' ')
    .trim()
  return plain.length > 90 ? `${plain.slice(0, 89)}…` : plain
}
