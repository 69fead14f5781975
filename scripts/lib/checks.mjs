// @ts-check
import { existsSync, mkdirSync, readFileSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { CommandFailed, Interrupted, lastLines, run } from './run.mjs'

/**
 * What a step of the checks came to. A check such as the linter counts as one; of tests each counts.
 *
 * @typedef {{ passed: number, failed: number, skipped: number }} Tally
 */

/** The steps that are one program each, and pass when it ends with 0. */
const PROGRAMS = {
  format: { title: 'Format (prettier)', program: 'prettier/bin/prettier.cjs', args: ['--check', '.'] },
  lint: { title: 'Lint (eslint)', program: 'eslint/bin/eslint.js', args: ['.', '--max-warnings=0'] },
  types: { title: 'Types (vue-tsc)', program: 'vue-tsc/bin/vue-tsc.js', args: ['-b', '--noEmit'] },
  unused: { title: 'Unused code (knip)', program: 'knip/bin/knip.js', args: ['--no-progress'] },
}

/** The steps that are projects of vitest.config.ts. */
const PROJECTS = {
  unit: 'Unit and model tests',
  nuxt: 'Component tests',
  db: 'Database tests',
  api: 'API tests',
  browser: 'Browser tests',
  deep: 'Deep tests',
}

/** Every step, in the order in which they run. */
export const STEP_NAMES = /** @type {const} */ ([
  'format',
  'lint',
  'types',
  'unused',
  'unit',
  'nuxt',
  'db',
  'api',
  'browser',
  'deep',
])

/** @typedef {typeof STEP_NAMES[number]} StepName */

/**
 * Runs one step and says how it went. It never throws for a failure: the next step shall run all the same.
 *
 * @param {StepName} name
 * @param {{ root: string, progress: import('./progress.mjs').Progress, filters?: readonly string[], env?: NodeJS.ProcessEnv }} options
 * @returns {Promise<Tally>}
 */
export async function runStep(name, options) {
  return name in PROGRAMS
    ? runProgram(PROGRAMS[/** @type {keyof typeof PROGRAMS} */ (name)], options)
    : runProject(/** @type {keyof typeof PROJECTS} */ (name), options)
}

/**
 * @param {{ title: string, program: string, args: readonly string[] }} check
 * @param {{ root: string, progress: import('./progress.mjs').Progress, env?: NodeJS.ProcessEnv }} options
 * @returns {Promise<Tally>}
 */
async function runProgram({ title, program, args }, { root, progress, env = process.env }) {
  try {
    await progress.step(title, (onLine) =>
      run({
        command: process.execPath,
        args: [join(root, 'node_modules', program), ...args],
        cwd: root,
        env: { ...env, NO_COLOR: '1', NUXT_TELEMETRY_DISABLED: '1' },
        onLine,
        timeoutMs: 600_000,
      }),
    )
    return { passed: 1, failed: 0, skipped: 0 }
  } catch (error) {
    if (error instanceof Interrupted) throw error
    progress.write(error instanceof CommandFailed ? lastLines(error.output, 200) : String(error))
    return { passed: 0, failed: 1, skipped: 0 }
  }
}

/**
 * @param {keyof typeof PROJECTS} name
 * @param {{ root: string, progress: import('./progress.mjs').Progress, filters?: readonly string[], env?: NodeJS.ProcessEnv }} options
 * @returns {Promise<Tally>}
 */
async function runProject(name, { root, progress, filters = [], env = process.env }) {
  const folder = join(root, '.data', 'test-reports')
  const report = join(folder, `${name}-${process.pid}.json`)
  mkdirSync(folder, { recursive: true })
  rmSync(report, { force: true })
  try {
    const { code, timedOut } = await progress.step(PROJECTS[name], () =>
      run({
        command: process.execPath,
        args: [
          join(root, 'node_modules', 'vitest', 'vitest.mjs'),
          'run',
          `--project=${name}`,
          '--reporter=default',
          '--reporter=json',
          `--outputFile.json=${report}`,
          ...filters,
        ],
        cwd: root,
        env: { ...env, NUXT_TELEMETRY_DISABLED: '1' },
        leashed: true,
        show: true,
        mayFail: true,
        timeoutMs: name === 'deep' ? 3_600_000 : 600_000,
      }),
    )
    if (timedOut)
      progress.say(`${PROJECTS[name]}: stopped, since they were not through in time; a test hangs`)
    const tally = tallyReport(existsSync(report) ? readFileSync(report, 'utf8') : undefined, code)
    progress.say(`${PROJECTS[name]}: ${tally.passed} passed, ${tally.failed} failed`)
    return tally
  } finally {
    rmSync(report, { force: true })
  }
}

/**
 * Counts the tests of a report. A file that could not be loaded counts as one failure, and so does a run that ended
 * badly for a reason that no test shows, or that held no test.
 *
 * @param {string | undefined} text vitest's JSON report; undefined when there is none
 * @param {number | null} code what the run ended with
 * @returns {Tally}
 */
export function tallyReport(text, code) {
  if (text === undefined) return { passed: 0, failed: 1, skipped: 0 }
  /** @type {{ testResults: { status: string, assertionResults: { status: string }[] }[] }} */
  const report = JSON.parse(text)
  const tests = report.testResults.flatMap((file) => file.assertionResults)
  /** @param {...string} states */
  const count = (...states) => tests.filter(({ status }) => states.includes(status)).length
  const brokenFiles = report.testResults.filter(
    (file) => file.status === 'failed' && !file.assertionResults.some(({ status }) => status === 'failed'),
  ).length
  const passed = count('passed')
  const failed = count('failed') + brokenFiles
  const unexplained = failed === 0 && (code !== 0 || passed === 0) ? 1 : 0
  return { passed, failed: failed + unexplained, skipped: count('pending', 'skipped', 'todo', 'disabled') }
}

/**
 * @param {readonly Tally[]} tallies
 * @returns {Tally}
 */
export function sumTallies(tallies) {
  /** @param {keyof Tally} name */
  const sum = (name) => tallies.reduce((total, tally) => total + tally[name], 0)
  return { passed: sum('passed'), failed: sum('failed'), skipped: sum('skipped') }
}

/** @param {Tally} tally */
export function closingLine({ passed, failed, skipped }) {
  return `${passed} passed, ${failed} failed${skipped === 0 ? '' : `, ${skipped} skipped`}`
}
