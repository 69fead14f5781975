// @ts-check
import { existsSync, readFileSync, rmSync, statSync } from 'node:fs'
import { join } from 'node:path'
import { isAlive } from './processes.mjs'
import { run } from './run.mjs'
import { asUser } from './users.mjs'

/**
 * The lock file of a PostgreSQL server: process, folder and port are its first, second and fourth line.
 *
 * @param {string} text
 */
export function parsePostmasterPid(text) {
  const lines = text.split('\n')
  return {
    pid: Math.abs(Number.parseInt(lines[0] ?? '', 10)) || 0,
    folder: lines[1] ?? '',
    port: Number(lines[3]) || 0,
  }
}

/**
 * @typedef {'serving' | 'stale' | 'unclear'} LockJudgement
 *
 * Judges a lock file by what its process really is. A killed server leaves the file behind; its number may since have
 * been given to another program, or to the server of a copy of this folder, for which PostgreSQL itself would refuse
 * to start. A server's working folder is its data folder, wherever that has been moved to since.
 *
 * @param {{ alive: boolean, sameFolder: boolean | undefined, commandLine: string | undefined }} seen
 * @returns {LockJudgement}
 */
export function judgeLock({ alive, sameFolder, commandLine }) {
  if (!alive) return 'stale'
  if (sameFolder !== undefined) return sameFolder ? 'serving' : 'stale'
  // The working folder can't be read: never remove the lock of what may be a running server.
  return commandLine !== undefined && !/postgres|postmaster/.test(commandLine) ? 'stale' : 'unclear'
}

/**
 * Looks whether a server runs on the folder.
 *
 * @param {string} folder
 * @param {import('./users.mjs').ServerUser} user
 * @returns {Promise<{ judgement: LockJudgement | 'none', pid: number, port: number }>}
 */
export async function inspectLock(folder, user) {
  const file = join(folder, 'postmaster.pid')
  if (!existsSync(file)) return { judgement: 'none', pid: 0, port: 0 }
  const { pid, port } = parsePostmasterPid(readFileSync(file, 'utf8'))
  const alive = isAlive(pid)
  const seen = alive
    ? { alive, sameFolder: await worksIn(pid, folder, user), commandLine: await commandLineOf(pid) }
    : { alive, sameFolder: undefined, commandLine: undefined }
  return { judgement: judgeLock(seen), pid, port }
}

/**
 * Removes the lock file of a server that is gone.
 *
 * @param {string} folder
 */
export function removeLock(folder) {
  rmSync(join(folder, 'postmaster.pid'), { force: true })
}

/**
 * @param {number} pid
 * @param {string} folder
 * @param {import('./users.mjs').ServerUser} user
 * @returns {Promise<boolean | undefined>} undefined when it can't be told
 */
async function worksIn(pid, folder, user) {
  if (!existsSync('/proc/self/cwd')) return undefined
  // Asked as the server's user: root in a container may not look into another user's process.
  const { code, stdout } = await run({
    command: 'stat',
    args: ['-L', '-c', '%d:%i', `/proc/${pid}/cwd`],
    cwd: '/',
    env: { PATH: process.env.PATH, LC_ALL: 'C' },
    user: asUser(user),
    finish: true,
    closing: true,
    mayFail: true,
  })
  if (code !== 0) {
    // Not that user's process, then, or one that has ended meanwhile.
    const owner = existsSync(`/proc/${pid}`) ? statSync(`/proc/${pid}`).uid : -1
    return owner === (user.uid ?? process.getuid?.()) ? undefined : false
  }
  const { dev, ino } = statSync(folder)
  return stdout.trim() === `${dev}:${ino}`
}

/** @param {number} pid */
async function commandLineOf(pid) {
  if (existsSync(`/proc/${pid}/cmdline`)) {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').replaceAll('\0', ' ').trim()
  }
  const { code, stdout } = await run({
    command: 'ps',
    args: ['-o', 'command=', '-p', String(pid)],
    finish: true,
    closing: true,
    mayFail: true,
  })
  return code === 0 ? stdout.trim() : undefined
}
