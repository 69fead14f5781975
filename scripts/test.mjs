// @ts-check
/**
 * `npm test`: installs what is missing, then every check and every test, on to the end whatever fails. Closes with one
 * line that counts them.
 */
import { existsSync } from 'node:fs'
import { join } from 'node:path'
import { ensureBuild } from './lib/build.mjs'
import { closingLine, runStep, sumTallies } from './lib/checks.mjs'
import { ensurePackages } from './lib/install.mjs'
import { startThrowawayCluster } from './lib/own-database.mjs'
import { Advice, installDebianPackage } from './lib/packages.mjs'
import { rootFolder as root } from './lib/paths.mjs'
import { createProgress } from './lib/progress.mjs'
import { CommandFailed, endRunning, Interrupted, run, tellingLines } from './lib/run.mjs'
import { parseTestArguments } from './lib/test-arguments.mjs'

const CLUSTER_STEPS = ['db', 'api', 'browser', 'deep']
const BUILD_STEPS = ['api', 'browser', 'deep']
const BROWSER_STEPS = ['browser', 'deep']

// The tests print for themselves: a sign of life between their files is enough.
const progress = createProgress({ heartbeatMs: 30_000 })
/** @type {import('./lib/checks.mjs').Tally[]} */
const tallies = []
/** @type {(() => Promise<void>) | undefined} */
let stopCluster
let ending = false

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(signal, () => {
    if (ending) return
    ending = true
    void endRunning(3000)
      .then(() => stopCluster?.())
      .finally(() => process.exit(130))
  })
}

/**
 * Something the steps after it need; without it they fail, one failure each.
 *
 * @param {readonly string[]} dependents
 * @param {() => Promise<void>} work
 * @returns {Promise<boolean>}
 */
async function prepare(dependents, work) {
  if (dependents.length === 0) return true
  try {
    await work()
    return true
  } catch (error) {
    if (error instanceof Interrupted) throw error
    if (error instanceof CommandFailed) progress.write(`${error.message}:\n${tellingLines(error.output, 60)}`)
    else progress.write(error instanceof Error ? error.message : String(error))
    progress.say(`Not run for want of it: ${dependents.join(', ')}`)
    tallies.push(...dependents.map(() => ({ passed: 0, failed: 1, skipped: 0 })))
    return false
  }
}

/**
 * Runs steps one after the other and counts what they come to.
 *
 * @param {readonly import('./lib/checks.mjs').StepName[]} names
 * @param {{ filters: readonly string[], env?: NodeJS.ProcessEnv }} options
 */
async function runAll(names, options) {
  for (const name of names) tallies.push(await runStep(name, { root, progress, ...options }))
}

async function test() {
  const { steps, filters } = parseTestArguments(process.argv.slice(2))
  let open = [...steps]
  /** @param {readonly string[]} names */
  const among = (names) => open.filter((name) => names.includes(name))
  /** @param {readonly string[]} names */
  const giveUp = (names) => (open = open.filter((name) => !names.includes(name)))

  progress.say(`Testing Longpull in ${root}: ${steps.join(', ')}`)
  const hasPackages = await prepare(open, async () => {
    await ensurePackages({ root, progress })
    await prepareNuxt()
  })
  if (!hasPackages) return
  if (among(['unit']).length > 0) await offerUnits()
  // Those without a need for servers first: the quick answers come early. The type check takes as long as the other
  // checks together, and one core.
  const lanes = [among(['types']), among(['format', 'lint', 'unused'])]
  await Promise.all(lanes.map((lane) => runAll(lane, { filters })))
  await runAll(among(['unit', 'nuxt']), { filters })

  const env = { ...process.env, LONGPULL_TEST_BUILT: '1' }
  const onCluster = among(CLUSTER_STEPS)
  if (!(await prepare(onCluster, () => openCluster(env)))) giveUp(CLUSTER_STEPS)
  if (among(['db']).length > 0) await runAll(['db'], { filters, env })

  const onBuild = among(BUILD_STEPS)
  if (!(await prepare(onBuild, async () => void (await ensureBuild({ root, progress }))))) giveUp(BUILD_STEPS)
  if (among(['api']).length > 0) await runAll(['api'], { filters, env })

  const onBrowser = among(BROWSER_STEPS)
  if (!(await prepare(onBrowser, ensureChromium))) giveUp(BROWSER_STEPS)
  await runAll(among(BROWSER_STEPS), { filters, env })
}

/** The types and settings that checks and tests read are made from the sources: made anew, they are never stale. */
async function prepareNuxt() {
  await progress.step('Preparing types (nuxt prepare)', (onLine) =>
    run({
      command: process.execPath,
      args: [join(root, 'node_modules', 'nuxt', 'bin', 'nuxt.mjs'), 'prepare'],
      cwd: root,
      env: { ...process.env, NUXT_TELEMETRY_DISABLED: '1' },
      onLine,
      leashed: true,
    }),
  )
}

/**
 * GNU units is a witness from outside for the unit conversions. Where it can't be installed without asking, its answers
 * stored with the tests stand in for it.
 */
async function offerUnits() {
  if (existsSync('/usr/bin/units')) return
  try {
    await installDebianPackage({ name: 'units', what: 'the program GNU units', progress })
  } catch (error) {
    if (error instanceof Interrupted) throw error
    progress.say('  GNU units is not there: its stored answers stand in')
  }
}

/** @param {NodeJS.ProcessEnv} env gets the addresses of the cluster */
async function openCluster(env) {
  const cluster = await progress.step('Starting a database for the tests', () =>
    startThrowawayCluster({ progress, onStop: (stop) => (stopCluster = stop) }),
  )
  for (const role of /** @type {const} */ (['admin', 'owner', 'app', 'backup'])) {
    env[`LONGPULL_TEST_${role.toUpperCase()}_URL`] = cluster.url(role, 'postgres')
  }
}

async function ensureChromium() {
  if (process.env.LONGPULL_CHROMIUM === undefined && !existsSync('/usr/bin/chromium')) {
    await installDebianPackage({ name: 'chromium', what: 'the browser chromium', progress })
  }
}

try {
  await test()
} catch (error) {
  if (!(error instanceof Interrupted)) {
    progress.write(
      error instanceof Advice ? error.message : String(error instanceof Error ? error.stack : error),
    )
    tallies.push({ passed: 0, failed: 1, skipped: 0 })
  }
}
if (!ending) {
  await stopCluster?.()
  const tally = sumTallies(tallies)
  progress.say('All steps are through')
  progress.write('')
  progress.write(closingLine(tally))
  process.exitCode = tally.failed === 0 && tally.passed > 0 ? 0 : 1
}
