// @ts-check
import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { setTimeout as sleep } from 'node:timers/promises'
import { cleanLine } from './progress.mjs'

const leash = new URL('./leash.mjs', import.meta.url).href

/** A program that ended otherwise than with 0; carries the end of what it printed. */
export class CommandFailed extends Error {
  /**
   * @param {string} what
   * @param {number | null} code
   * @param {string} output
   */
  constructor(what, code, output) {
    super(`${what} ended with ${code === null ? 'a signal' : `code ${code}`}`)
    this.name = 'CommandFailed'
    this.code = code
    this.output = output
  }
}

/**
 * The programs running now. `finish` marks the short ones that must not be cut off half-way (initdb, pg_ctl, psql):
 * an interrupted start waits for them and ends the others.
 *
 * @type {Set<{ child: import('node:child_process').ChildProcess, finish: boolean, ended: Promise<unknown> }>}
 */
const running = new Set()
let ending = false

/** What a step gets that would begin after the end has begun. */
export class Interrupted extends Error {}

/**
 * @typedef {object} Command
 * @property {string} command
 * @property {readonly string[]} [args]
 * @property {string} [cwd]
 * @property {NodeJS.ProcessEnv} [env] the whole environment; the present one when left out
 * @property {{ uid?: number, gid?: number }} [user] whom to run it as; oneself when left out
 * @property {string} [input] what it reads; secrets go here, never among the arguments
 * @property {(line: string) => void} [onLine]
 * @property {boolean} [finish] short, and not to be interrupted
 * @property {boolean} [closing] part of taking things down: may begin when the end has begun
 * @property {boolean} [leashed] a Node program that ends when this one is gone
 * @property {number} [timeoutMs]
 * @property {boolean} [mayFail] a code other than 0 is an answer, not an error
 * @property {boolean} [show] print through instead of keeping
 *
 * @param {Command} options
 * @returns {Promise<{ code: number | null, stdout: string, output: string, timedOut: boolean }>}
 */
export async function run(options) {
  const { command, args = [], cwd, user = {}, input, onLine, finish = false } = options
  if (ending && !options.closing) throw new Interrupted()
  const env = { ...(options.env ?? process.env) }
  if (options.leashed) env.NODE_OPTIONS = `${env.NODE_OPTIONS ?? ''} --import=${leash}`.trim()
  const out = options.show ? 'inherit' : 'pipe'
  /** @type {import('node:child_process').StdioOptions} */
  const stdio = [input === undefined ? 'ignore' : 'pipe', out, out]
  if (options.leashed) stdio.push('ipc')
  /** @type {import('node:child_process').ChildProcess} */
  const child = spawn(command, args, {
    cwd,
    env,
    ...user,
    // A group of its own: Ctrl-C in the terminal reaches this program only, which then ends the others in order.
    detached: true,
    stdio,
  })

  let timedOut = false
  let stdout = ''
  let output = ''
  /** @param {Buffer} chunk */
  const take = (chunk) => {
    const text = chunk.toString('utf8')
    output = (output + text).slice(-200_000)
    if (onLine !== undefined) for (const line of text.split(/[\r\n]+/)) onLine(line)
  }
  child.stdout?.on('data', (/** @type {Buffer} */ chunk) => {
    stdout += chunk.toString('utf8')
    take(chunk)
  })
  child.stderr?.on('data', take)
  if (input !== undefined) {
    // A program that ends before reading everything must not take this one with it; its exit code tells the story.
    child.stdin?.on('error', () => {})
    child.stdin?.end(input)
  }

  const ended = once(child, 'close')
  const entry = { child, finish, ended: ended.catch(() => {}) }
  running.add(entry)
  const timer =
    options.timeoutMs === undefined
      ? undefined
      : setTimeout(() => {
          timedOut = true
          output += `\n(stopped: not done after ${(options.timeoutMs ?? 0) / 1000} s)`
          signalGroup(child, 'SIGKILL')
        }, options.timeoutMs)
  try {
    const [code] = /** @type {[number | null]} */ (await ended)
    if (code !== 0 && !options.mayFail) throw new CommandFailed([command, ...args].join(' '), code, output)
    return { code, stdout, output, timedOut }
  } finally {
    clearTimeout(timer)
    running.delete(entry)
  }
}

/**
 * Ends what runs (but lets the short, uncuttable programs finish), and waits until all have ended. Nothing begins any
 * more but what takes things down.
 *
 * @param {number} [patienceMs] how long before those that do not end are made to
 */
export async function endRunning(patienceMs = 10_000) {
  ending = true
  const entries = [...running]
  for (const { child, finish } of entries) if (!finish) signalGroup(child, 'SIGTERM')
  const all = Promise.all(entries.map((entry) => entry.ended))
  await Promise.race([all, sleep(patienceMs, undefined, { ref: false })])
  for (const { child, finish } of running) if (!finish) signalGroup(child, 'SIGKILL')
  await all
}

/**
 * Sends a signal to a child and all that it started.
 *
 * @param {import('node:child_process').ChildProcess} child started with `detached: true`
 * @param {NodeJS.Signals} signal
 */
export function signalGroup(child, signal) {
  if (child.pid === undefined) return
  try {
    process.kill(-child.pid, signal)
  } catch {
    // Gone already.
  }
}

/**
 * The last lines worth reading of what a program printed.
 *
 * @param {string} output
 * @param {number} [count]
 */
export function lastLines(output, count = 25) {
  return output
    .split(/\r?\n/)
    .filter((line) => cleanLine(line) !== '')
    .slice(-count)
    .join('\n')
}

/**
 * The part of a failed program's output that tells why: from its first complaint on, else its end.
 *
 * @param {string} output
 * @param {number} [count]
 */
export function tellingLines(output, count = 40) {
  const lines = output.split(/\r?\n/).filter((line) => cleanLine(line) !== '')
  const first = lines.findIndex((line) => /(^|\W)(error|fatal)(\W|$)|ERR!/i.test(line))
  return (first === -1 ? lines.slice(-count) : lines.slice(first, first + count)).join('\n')
}
