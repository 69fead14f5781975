// @ts-check
import { readFileSync, rmSync } from 'node:fs'
import { setTimeout as sleep } from 'node:timers/promises'
import { Advice } from './packages.mjs'
import { processMark, stillRuns } from './processes.mjs'
import { writePrivate } from './secrets.mjs'

/**
 * @typedef {{ pid: number, mark?: string }} Noted
 * @typedef {Noted & { port: number, app?: Noted }} StartNote
 */

/**
 * One start command at a time in a checkout. What a killed one left running is waited for or ended.
 *
 * @param {{ file: string, port: number, say: (text: string) => void }} options
 */
export async function claimStart({ file, port, say }) {
  const earlier = readNote(file)
  if (earlier !== undefined && earlier.pid !== process.pid && stillRuns(earlier)) {
    throw new Advice(
      `Longpull already runs from this folder, on port ${earlier.port} (process ${earlier.pid}). End it first (Ctrl-C there, or kill ${earlier.pid}).`,
    )
  }
  if (earlier?.app !== undefined && stillRuns(earlier.app)) await endLeftover(earlier.app, say)

  /** @type {StartNote} */
  const note = { pid: process.pid, mark: processMark(process.pid), port }
  writePrivate(file, `${JSON.stringify(note)}\n`)
  return {
    /** @param {number} pid */
    noteApp: (pid) =>
      writePrivate(file, `${JSON.stringify({ ...note, app: { pid, mark: processMark(pid) } })}\n`),
    release: () => rmSync(file, { force: true }),
  }
}

/**
 * @param {Noted} app
 * @param {(text: string) => void} say
 */
async function endLeftover(app, say) {
  say(`ending the application that an earlier start left running (process ${app.pid})`)
  /** @param {NodeJS.Signals} signal */
  const send = (signal) => {
    try {
      process.kill(app.pid, signal)
    } catch {
      // Ended by itself meanwhile.
    }
  }
  send('SIGTERM')
  for (let waited = 0; stillRuns(app) && waited < 200; waited += 1) await sleep(50)
  if (stillRuns(app)) send('SIGKILL')
  for (let waited = 0; stillRuns(app) && waited < 100; waited += 1) await sleep(50)
}

/**
 * @param {string} file
 * @returns {StartNote | undefined}
 */
function readNote(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'))
  } catch {
    return undefined
  }
}
