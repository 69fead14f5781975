// @ts-check
/**
 * `npm start`: from a fresh clone to a served application, and the same again in seconds when nothing has changed.
 * Uses Node's own modules only, since nothing is installed yet when it first runs.
 */
import { spawn } from 'node:child_process'
import { closeSync, existsSync, mkdirSync, openSync, readFileSync, renameSync } from 'node:fs'
import { join } from 'node:path'
import { spawnApp, superviseChild, waitUntilReady } from './lib/app-process.mjs'
import { ensureBuild } from './lib/build.mjs'
import { explainPortProblem, hostsToProbe, hostToAsk, readSettings } from './lib/environment.mjs'
import { ensurePackages } from './lib/install.mjs'
import { startOwnDatabase } from './lib/own-database.mjs'
import { Advice } from './lib/packages.mjs'
import { rootFolder as root } from './lib/paths.mjs'
import { portProblem } from './lib/ports.mjs'
import { createProgress } from './lib/progress.mjs'
import { CommandFailed, endRunning, Interrupted, lastLines, run, tellingLines } from './lib/run.mjs'
import { loadSecrets } from './lib/secrets.mjs'
import { claimStart } from './lib/single-start.mjs'

const DEMO_PEOPLE = [
  ['owner@longpull.test', 'owner'],
  ['estimator@longpull.test', 'estimator'],
  ['technician@longpull.test', 'technician'],
  ['customer@longpull.test', 'customer'],
  ['owner@othershop.test', 'owner of another shop'],
]

const dev = process.argv.includes('--dev')
const progress = createProgress()

/**
 * What has been brought up and must be taken down again, the latest first.
 *
 * @type {{ name: string, close: () => Promise<unknown>, force: () => Promise<unknown> }[]}
 */
const opened = []
let endingSince = 0

function continueUnlessEnding() {
  if (endingSince !== 0) throw new Interrupted()
}

/** @param {number} code */
async function end(code) {
  endingSince ||= Date.now()
  await endRunning()
  for (let entry = opened.at(-1); entry !== undefined; entry = opened.at(-1)) {
    progress.say(`Ending ${entry.name}`)
    await entry.close().catch((error) => progress.say(`  ${error.message}`))
    // Only now: an impatient second Ctrl-C must still find it.
    opened.pop()
  }
  progress.say('Ended')
  process.exit(code)
}

async function endAtOnce() {
  progress.say('Ending at once')
  await endRunning(0)
  await Promise.allSettled(opened.reverse().map(({ force }) => force()))
  process.exit(130)
}

for (const signal of /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP'])) {
  process.on(signal, () => {
    // npm passes a Ctrl-C on that the terminal has sent to this process already: within a second it is the same one.
    if (endingSince === 0) void end(0)
    else if (Date.now() - endingSince > 1000) void endAtOnce()
  })
}

// An npm that was killed outright passes nothing on: the parent is then another one.
if (['start', 'dev'].includes(process.env.npm_lifecycle_event ?? '')) {
  const parent = process.ppid
  setInterval(() => {
    if (process.ppid !== parent && endingSince === 0) void end(0)
  }, 500).unref()
}

async function start() {
  const settings = readSettings(process.env)
  progress.say(`Longpull starts in ${root}`)
  const claim = await claimStart({
    file: join(root, '.data', 'start.json'),
    port: settings.port,
    say: (text) => progress.say(`  ${text}`),
  })
  process.on('exit', () => claim.release())

  for (const host of hostsToProbe(settings.host)) {
    const problem = await portProblem(settings.port, host)
    // A machine without IPv6 has no ::1; nobody else can be listening there either.
    if (problem !== undefined && !(host === '::1' && problem !== 'EADDRINUSE')) {
      throw new Advice(explainPortProblem(problem, settings.port))
    }
  }

  const database = settings.ownDatabase ? await openOwnDatabase() : undefined
  continueUnlessEnding()
  await ensurePackages({ root, progress })
  continueUnlessEnding()
  if (!dev) await ensureBuild({ root, progress })
  continueUnlessEnding()

  /** @type {NodeJS.ProcessEnv} */
  const env = {
    ...process.env,
    NODE_ENV: dev ? 'development' : 'production',
    LONGPULL_DEMO: settings.demo ? '1' : '0',
    NUXT_TELEMETRY_DISABLED: '1',
    PUBLIC_URL: settings.publicUrl,
    ...(settings.demo && !process.env.NUXT_SESSION_PASSWORD
      ? { NUXT_SESSION_PASSWORD: loadSecrets(join(root, '.data', 'secrets.json')).session }
      : {}),
    ...(database === undefined
      ? {}
      : {
          DATABASE_URL: database.url('app', 'longpull'),
          DATABASE_OWNER_URL: database.url('owner', 'longpull'),
          DATABASE_BACKUP_URL: database.url('backup', 'longpull'),
        }),
  }
  await runScript('Bringing the tables up to date', 'migrate.ts', env)
  continueUnlessEnding()
  if (settings.demo)
    await runScript('Putting the demo data in, if they are not there yet', 'seed-demo.ts', env)
  continueUnlessEnding()

  const { app, logFile } = dev ? serveDev(settings, env) : serve(settings, env)
  claim.noteApp(app.pid)
  opened.push({ name: 'the application', close: () => app.stop(), force: () => app.stop(0) })
  const { ready, answer } = await progress.step('Starting the application', () =>
    waitUntilReady({
      host: hostToAsk(settings.host),
      port: settings.port,
      app,
      timeoutMs: dev ? 180_000 : 60_000,
    }),
  )
  continueUnlessEnding()
  if (!ready) throw new Error(`the application does not serve (last answer: ${answer})\n${tail(logFile)}`)

  announce(settings, logFile)
  const { code, signal } = await app.ended
  if (endingSince !== 0) return
  progress.say(`The application ended by itself (${signal ?? `code ${code}`}). The end of its log:`)
  progress.write(tail(logFile))
  await end(1)
}

function openOwnDatabase() {
  return startOwnDatabase({
    root,
    progress,
    onStop: (stop) =>
      opened.push({ name: 'the database', close: () => stop('fast'), force: () => stop('immediate') }),
  })
}

/**
 * @param {string} title
 * @param {string} name
 * @param {NodeJS.ProcessEnv} env
 */
async function runScript(title, name, env) {
  await progress.step(title, (onLine) =>
    run({
      command: process.execPath,
      args: ['--import', 'tsx', join(root, 'scripts', name)],
      cwd: root,
      env,
      onLine,
      leashed: true,
    }),
  )
}

/**
 * @param {ReturnType<typeof readSettings>} settings
 * @param {NodeJS.ProcessEnv} env
 */
function serve({ host, port }, env) {
  const folder = join(root, '.data', 'logs')
  const logFile = join(folder, 'app.log')
  mkdirSync(folder, { recursive: true })
  // The run before is kept: it may tell why it ended.
  if (existsSync(logFile)) renameSync(logFile, join(folder, 'app.previous.log'))
  const output = openSync(logFile, 'a', 0o600)
  const app = spawnApp({ root, host, port, env, output })
  closeSync(output)
  return { app, logFile }
}

/**
 * @param {ReturnType<typeof readSettings>} settings
 * @param {NodeJS.ProcessEnv} env
 * @returns {{ app: ReturnType<typeof superviseChild>, logFile: string | undefined }}
 */
function serveDev({ host, port }, env) {
  const child = spawn(
    process.execPath,
    [join(root, 'node_modules', 'nuxt', 'bin', 'nuxt.mjs'), 'dev', '--port', String(port), '--host', host],
    { cwd: root, env, stdio: ['ignore', 'inherit', 'inherit'], detached: true },
  )
  return { app: superviseChild(child), logFile: undefined }
}

/** @param {string | undefined} file */
function tail(file) {
  return file !== undefined && existsSync(file) ? lastLines(readFileSync(file, 'utf8')) : ''
}

/**
 * @param {ReturnType<typeof readSettings>} settings
 * @param {string | undefined} logFile
 */
function announce(settings, logFile) {
  progress.say(`Longpull is up at ${settings.publicUrl}`)
  const loopbackOnly = ['127.0.0.1', '::1', 'localhost'].includes(settings.host)
  progress.write('')
  if (settings.demo) {
    progress.write('  Sign in with the password longpull-demo as')
    for (const [email, who] of DEMO_PEOPLE) progress.write(`    ${email?.padEnd(28)} ${who}`)
    progress.write('')
    if (!loopbackOnly)
      progress.write('  Whoever can reach this machine can sign in so; LONGPULL_DEMO=0 serves without.')
  }
  if (loopbackOnly) progress.write('  Only this machine can reach it; HOST=0.0.0.0 opens it to others.')
  if (logFile !== undefined) progress.write(`  Its log is in ${logFile}`)
  progress.write('  Ctrl-C ends it.')
  progress.write('')
}

try {
  await start()
} catch (error) {
  if (!(error instanceof Interrupted) && endingSince === 0) {
    if (error instanceof Advice) progress.write(`\n${error.message}\n`)
    else if (error instanceof CommandFailed)
      progress.write(`\n${error.message}:\n${tellingLines(error.output)}\n`)
    else progress.write(`\n${error instanceof Error ? error.message : String(error)}\n`)
    await end(1)
  }
}
