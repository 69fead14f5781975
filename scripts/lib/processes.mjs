// @ts-check
import { execFileSync } from 'node:child_process'
import { readFileSync } from 'node:fs'

/**
 * Whether a process of that number exists (also one that is not ours to signal).
 *
 * @param {number} pid
 */
export function isAlive(pid) {
  if (!Number.isInteger(pid) || pid <= 0) return false
  try {
    process.kill(pid, 0)
    return true
  } catch (error) {
    return /** @type {NodeJS.ErrnoException} */ (error).code === 'EPERM'
  }
}

/**
 * What tells a process from a later one that got the same number: when it began. Undefined when there is none, or only
 * the remains of one that its parent has not collected.
 *
 * @param {number} pid
 * @returns {string | undefined}
 */
export function processMark(pid) {
  if (!isAlive(pid)) return undefined
  try {
    const boot = readFileSync('/proc/sys/kernel/random/boot_id', 'utf8').trim()
    return parseStat(readFileSync(`/proc/${pid}/stat`, 'utf8'), boot)
  } catch {
    return markByPs(pid)
  }
}

/**
 * @param {string} stat the line of /proc/PID/stat; its second field, a name in parentheses, may hold anything
 * @param {string} boot
 */
export function parseStat(stat, boot) {
  const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
  if (fields[0] === 'Z' || fields[0] === 'X') return undefined
  // Field 22 of the line, the 20th after the name: start time in clock ticks after boot.
  return `${boot} ${fields[19]}`
}

/** @param {number} pid */
function markByPs(pid) {
  try {
    return execFileSync('ps', ['-o', 'lstart=', '-p', String(pid)], { encoding: 'utf8' }).trim() || undefined
  } catch {
    return undefined
  }
}

/**
 * Whether the process noted down earlier still runs.
 *
 * @param {{ pid: number, mark?: string } | undefined} noted
 */
export function stillRuns(noted) {
  return noted !== undefined && noted.mark !== undefined && processMark(noted.pid) === noted.mark
}
