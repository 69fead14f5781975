import { randomBytes } from 'node:crypto'
import { existsSync } from 'node:fs'
import { join } from 'node:path'
import { spawnApp, waitUntilReady, type AppProcess } from '../../scripts/lib/app-process.mjs'
import { rootFolder } from '../../scripts/lib/paths.mjs'
import { choosePort } from '../../scripts/lib/ports.mjs'
import { plainEnvironment, type TestDatabase } from './database'

export interface TestApp {
  baseUrl: string
  port: number
  pid: number
  /** The lines it has printed so far. */
  logs: () => string[]
  /** Asks it to end, as the start command does, and waits. */
  stop: () => Promise<void>
  /** Takes it down as a power cut would. */
  kill: () => Promise<void>
  /** Settles when it has ended, by itself or otherwise. */
  ended: AppProcess['ended']
}

/** Those of this test process that still run; none may be left behind. */
const started = new Set<AppProcess>()
process.on('exit', () => {
  for (const app of started) app.child.kill('SIGKILL')
})

/**
 * Serves the built application on a free port and waits until it says that it is ready.
 *
 * @param options.database - the one it serves from
 * @param options.env - settings over the usual ones; undefined takes one away
 * @param options.untilReady - false returns at once, for tests of an application that can't become ready
 * @param options.port - a given one, to start again where an earlier one was
 */
export async function startApp(options: {
  database: Pick<TestDatabase, 'env'>
  env?: Record<string, string | undefined>
  untilReady?: boolean
  port?: number
}): Promise<TestApp> {
  if (!existsSync(join(rootFolder, '.output', 'server', 'index.mjs'))) {
    throw new Error(
      'There is no built application: run this test in the projects api or browser, which build it',
    )
  }
  const host = '127.0.0.1'
  const port = options.port ?? (await choosePort())
  const baseUrl = `http://${host}:${port}`
  const app = spawnApp({
    root: rootFolder,
    host,
    port,
    output: 'pipe',
    env: {
      ...plainEnvironment(),
      NODE_ENV: 'production',
      NUXT_TELEMETRY_DISABLED: '1',
      NUXT_SESSION_PASSWORD: randomBytes(36).toString('base64url'),
      LONGPULL_DEMO: '1',
      PUBLIC_URL: baseUrl,
      ...options.database.env,
      ...options.env,
    },
  })
  started.add(app)
  void app.ended.then(() => started.delete(app))

  let printed = ''
  for (const stream of [app.child.stdout, app.child.stderr]) {
    stream?.setEncoding('utf8')
    stream?.on('data', (text: string) => (printed += text))
  }
  if (options.untilReady !== false) {
    const { ready, answer } = await waitUntilReady({ host, port, app, timeoutMs: 30_000 })
    if (!ready) {
      await app.stop(0)
      throw new Error(`the application did not become ready (last answer: ${answer})\n${printed}`)
    }
  }
  return {
    baseUrl,
    port,
    pid: app.pid,
    logs: () => printed.split('\n').filter((line) => line !== ''),
    stop: async () => void (await app.stop()),
    kill: async () => void (await app.stop(0)),
    ended: app.ended,
  }
}
