// @ts-check
import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { request } from 'node:http'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { fileURLToPath } from 'node:url'
import { signalGroup } from './run.mjs'

const leash = fileURLToPath(new URL('./leash.mjs', import.meta.url))

/**
 * The built application as a process on a leash: it ends when this one is gone.
 *
 * @typedef {ReturnType<typeof spawnApp>} AppProcess
 * @param {{ root: string, host: string, port: number, env: NodeJS.ProcessEnv, output: 'pipe' | number, node?: readonly string[] }} options
 *   output: where it writes, an open file's number or a pipe; node: further arguments for Node itself
 */
export function spawnApp({ root, host, port, env, output, node = [] }) {
  const child = spawn(
    process.execPath,
    [...node, `--import=${leash}`, join(root, '.output', 'server', 'index.mjs')],
    {
      cwd: root,
      env: { ...env, HOST: host, NITRO_HOST: host, PORT: String(port), NITRO_PORT: String(port) },
      stdio: ['ignore', output, output, 'ipc'],
      detached: true,
    },
  )
  return superviseChild(child)
}

/**
 * @param {import('node:child_process').ChildProcess} child in a group of its own
 */
export function superviseChild(child) {
  /** @type {{ code: number | null, signal: NodeJS.Signals | null } | undefined} */
  let end
  const ended = new Promise(
    (/** @type {(end: { code: number | null, signal: NodeJS.Signals | null }) => void} */ resolve) => {
      child.once('exit', (code, signal) => resolve((end = { code, signal })))
      child.once('error', () => resolve((end = { code: 127, signal: null })))
    },
  )
  return {
    child,
    pid: child.pid ?? 0,
    ended,
    hasEnded: () => end !== undefined,
    /**
     * Asks it to end, and makes it after a while.
     *
     * @param {number} [patienceMs]
     */
    stop: async (patienceMs = 10_000) => {
      if (end !== undefined) return end
      child.kill('SIGTERM')
      await Promise.race([ended, sleep(patienceMs, undefined, { ref: false })])
      signalGroup(child, 'SIGKILL')
      return ended
    },
  }
}

/**
 * Waits until the application says that it can serve.
 *
 * @param {{ host: string, port: number, app: { hasEnded: () => boolean }, timeoutMs?: number }} options
 * @returns {Promise<{ ready: boolean, answer: string }>} the last answer tells what it was waiting for
 */
export async function waitUntilReady({ host, port, app, timeoutMs = 60_000 }) {
  const deadline = Date.now() + timeoutMs
  let answer = 'no answer'
  while (Date.now() < deadline && !app.hasEnded()) {
    const { status, body } = await ask(host, port, '/readyz')
    if (status === 200) return { ready: true, answer: body }
    if (status !== 0) answer = `${status} ${body}`
    await sleep(100)
  }
  return { ready: false, answer }
}

/**
 * @param {string} host
 * @param {number} port
 * @param {string} path
 * @returns {Promise<{ status: number, body: string }>} status 0 when nothing answers
 */
async function ask(host, port, path) {
  try {
    const call = request({ host, port, path, timeout: 5000, agent: false })
    call.once('timeout', () => call.destroy(new Error('no answer in time')))
    call.end()
    const [response] = /** @type {[import('node:http').IncomingMessage]} */ (await once(call, 'response'))
    let body = ''
    response.setEncoding('utf8')
    for await (const chunk of response) body += chunk
    return { status: response.statusCode ?? 0, body: body.slice(0, 500) }
  } catch {
    return { status: 0, body: '' }
  }
}
