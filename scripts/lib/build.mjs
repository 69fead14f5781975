// @ts-check
import { existsSync, mkdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { hashPaths } from './hash.mjs'
import { processMark, stillRuns } from './processes.mjs'
import { run } from './run.mjs'

/** What the built application is made of. */
export const SOURCES = [
  'app.vue',
  'assets',
  'components',
  'composables',
  'error.vue',
  'layouts',
  'middleware',
  'nuxt.config.ts',
  'package-lock.json',
  'pages',
  'plugins',
  'public',
  'server',
  'shared',
  'stores',
  'tailwind.config.ts',
  'tsconfig.json',
  'utils',
  'workers',
]

/** @param {string} root */
export function hashSources(root) {
  return hashPaths(root, SOURCES)
}

/**
 * Whether the built application is whole and made of the present sources. The stamp is written last, and the builder
 * empties the folder it lies in first: a build that was cut off has none.
 *
 * @param {string} root
 * @param {string} [hash] of the present sources
 */
export function isBuildCurrent(root, hash = hashSources(root)) {
  const stamp = join(root, '.output', 'longpull-build.json')
  if (!existsSync(stamp) || !existsSync(join(root, '.output', 'server', 'index.mjs'))) return false
  try {
    return JSON.parse(readFileSync(stamp, 'utf8')).sources === hash
  } catch {
    return false
  }
}

/**
 * Builds the application if its sources have changed.
 *
 * @param {{ root: string, progress: import('./progress.mjs').Progress }} options
 * @returns {Promise<boolean>} whether it was built
 */
export async function ensureBuild({ root, progress }) {
  if (isBuildCurrent(root)) return false
  return progress.step('Building the application (about a minute)', (onLine) =>
    withLock(join(root, '.data', 'build.lock'), onLine, async () => {
      const hash = hashSources(root)
      // Whoever held the lock may have built just this.
      if (isBuildCurrent(root, hash)) return false
      const stamp = join(root, '.output', 'longpull-build.json')
      rmSync(stamp, { force: true })
      await run({
        command: process.execPath,
        args: [join(root, 'node_modules', 'nuxt', 'bin', 'nuxt.mjs'), 'build'],
        cwd: root,
        env: { ...process.env, NODE_ENV: 'production', NUXT_TELEMETRY_DISABLED: '1' },
        leashed: true,
        onLine,
      })
      writeFileSync(stamp, `${JSON.stringify({ sources: hash })}\n`)
      return true
    }),
  )
}

/**
 * One at a time, over all processes of this checkout; the lock of one that is gone does not count.
 *
 * @template T
 * @param {string} file
 * @param {(line: string) => void} report
 * @param {() => Promise<T>} work
 */
async function withLock(file, report, work) {
  mkdirSync(join(file, '..'), { recursive: true })
  for (;;) {
    try {
      writeFileSync(file, JSON.stringify({ pid: process.pid, mark: processMark(process.pid) }), {
        flag: 'wx',
      })
      break
    } catch (error) {
      if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EEXIST') throw error
      const holder = readHolder(file)
      if (holder === undefined ? isOld(file) : !stillRuns(holder)) {
        rmSync(file, { force: true })
        continue
      }
      report(
        `waiting for another build of this folder${holder === undefined ? '' : ` (process ${holder.pid})`}`,
      )
      await sleep(500)
    }
  }
  try {
    return await work()
  } finally {
    rmSync(file, { force: true })
  }
}

/**
 * Whether a lock without a holder has lain there for longer than it takes to write one.
 *
 * @param {string} file
 */
function isOld(file) {
  const info = statSync(file, { throwIfNoEntry: false })
  return info !== undefined && Date.now() - info.mtimeMs > 10_000
}

/**
 * @param {string} file
 * @returns {{ pid: number, mark?: string } | undefined} undefined while it is being written or is gone again
 */
function readHolder(file) {
  try {
    return JSON.parse(readFileSync(file, 'utf8'))
  } catch {
    return undefined
  }
}
