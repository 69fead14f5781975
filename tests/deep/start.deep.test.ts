import {
  chmodSync,
  existsSync,
  mkdirSync,
  mkdtempSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs'
import { createServer } from 'node:net'
import { once } from 'node:events'
import { join } from 'node:path'
import { setTimeout as sleep } from 'node:timers/promises'
import { afterEach, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { choosePort } from '../../scripts/lib/ports.mjs'
import { createTestDatabase } from '../support/database'
import { callApi, signIn } from '../support/sign-in'
import {
  beside,
  clusterFolder,
  copyCheckout,
  killAll,
  postmasterOf,
  processesOf,
  runStart,
  untilNobody,
  type StartCommand,
} from '../support/start-command'

const isRoot = process.getuid?.() === 0

/**
 * The start command from end to end, in copies of the checkout that share its packages and build. What installing and
 * building take is not part of it.
 */
describe('npm start', () => {
  let base: string
  let folder: string
  let port: number
  let app: { baseUrl: string }
  const commands: StartCommand[] = []
  const places: string[] = []

  beforeEach(async () => {
    base = mkdtempSync('/var/tmp/longpull-deep-')
    // Made for its owner alone, but the database server's user has to pass through.
    chmodSync(base, 0o755)
    folder = join(base, 'checkout')
    copyCheckout(folder)
    port = await choosePort()
    app = { baseUrl: `http://localhost:${port}` }
  })

  afterEach(async () => {
    for (const { child } of commands.splice(0)) child.kill('SIGKILL')
    for (const place of [base, ...places.splice(0)]) {
      killAll(place)
      await untilNobody(place)
      rmSync(place, { recursive: true, force: true })
    }
  })

  function start(env: Record<string, string> = {}, where = folder): StartCommand {
    const command = runStart(where, { PORT: String(port), ...env })
    commands.push(command)
    return command
  }

  async function startUntilUp(env: Record<string, string> = {}, where = folder): Promise<StartCommand> {
    const command = start(env, where)
    await command.until(/Longpull is up at/)
    return command
  }

  async function countBuilds(): Promise<number> {
    const { call } = await signIn(app, 'owner')
    return ((await call('GET', '/api/builds')).body as { total: number }).total
  }

  it('comes up with the demo, says how to sign in, and ends application and database on a signal', async () => {
    const command = await startUntilUp()
    expect(command.output()).toMatch(/estimator@longpull\.test/)
    expect(await countBuilds()).toBeGreaterThan(0)
    expect((await callApi({ baseUrl: `http://127.0.0.1:${port}` }, 'GET', '/readyz')).status).toBe(200)

    command.child.kill('SIGTERM')
    expect(await command.ended).toEqual({ code: 0, signal: null })
    expect(command.output()).toMatch(/Ending the application[\s\S]*Ending the database[\s\S]*Ended/)
    await untilNobody(folder)
  })

  it('shows no password in a process list, and keeps them for its owner alone', async () => {
    await startUntilUp()
    const secrets = JSON.parse(readFileSync(join(folder, '.data', 'secrets.json'), 'utf8')) as Record<
      string,
      string
    >
    const list = processesOf(folder).map(({ command }) => command)
    expect(list.length).toBeGreaterThan(2)
    for (const secret of Object.values(secrets)) expect(list.join('\n')).not.toContain(secret)
    expect(statSync(join(folder, '.data', 'secrets.json')).mode & 0o777).toBe(0o600)
    const log = readFileSync(join(clusterFolder(folder), 'server.log'), 'utf8')
    for (const secret of Object.values(secrets)) expect(log).not.toContain(secret)
  })

  it('is up within 15 s the second time, with the same data and without building', async () => {
    const first = await startUntilUp()
    const builds = await countBuilds()
    first.child.kill('SIGINT')
    await first.ended

    const begin = performance.now()
    const second = await startUntilUp()
    const seconds = (performance.now() - begin) / 1000
    console.log(`second start: up after ${seconds.toFixed(1)} s`)
    expect(second.output()).not.toMatch(/Building|Installing/)
    expect(await countBuilds()).toBe(builds)
    expect(seconds).toBeLessThan(15)
  })

  it('refuses to run twice from one folder, and leaves the first alone', async () => {
    await startUntilUp()
    const second = start({ PORT: String(await choosePort()) })
    expect((await second.ended).code).toBe(1)
    expect(second.output()).toMatch(/already runs from this folder, on port/)
    expect((await callApi(app, 'GET', '/readyz')).status).toBe(200)
  })

  it('takes over after kill -9 of the command: the application ends, the database goes on', async () => {
    const first = await startUntilUp()
    const server = postmasterOf(clusterFolder(folder))
    first.child.kill('SIGKILL')
    await first.ended
    const second = await startUntilUp()
    expect(second.output()).toMatch(/taking over the database server/)
    expect(postmasterOf(clusterFolder(folder))).toBe(server)
    expect(await countBuilds()).toBeGreaterThan(0)
  })

  it('survives kill -9 of everything, also when the number in the lock file went to another program', async () => {
    const first = await startUntilUp()
    const builds = await countBuilds()
    const cluster = clusterFolder(folder)
    first.child.kill('SIGKILL')
    killAll(folder)
    await untilNobody(folder)
    const lock = join(cluster, 'postmaster.pid')
    expect(existsSync(lock)).toBe(true)
    const lines = readFileSync(lock, 'utf8').split('\n')
    writeFileSync(lock, [String(process.pid), ...lines.slice(1)].join('\n'))

    const second = await startUntilUp()
    expect(second.output()).toMatch(/removing the lock file of a database server that is gone/)
    expect(await countBuilds()).toBe(builds)
  })

  it('says what to set when its port is taken, and leaves nothing running', async () => {
    for (const host of ['127.0.0.1', '::1']) {
      const other = createServer().listen(port, host)
      await once(other, 'listening')
      const command = start()
      expect((await command.ended).code).toBe(1)
      expect(command.output()).toMatch(new RegExp(`Port ${port} is taken.*PORT=${port + 1} npm start`))
      await untilNobody(folder)
      other.close()
      await once(other, 'close')
    }
  })

  it('moves the database to another port when its own is taken', async () => {
    const first = await startUntilUp()
    first.child.kill('SIGTERM')
    await first.ended
    const state = JSON.parse(readFileSync(join(folder, '.data', 'cluster.json'), 'utf8')) as { port: number }
    const other = createServer().listen(state.port, '127.0.0.1')
    await once(other, 'listening')
    const second = await startUntilUp()
    expect(second.output()).toMatch(new RegExp(`port ${state.port} is taken; the database moves to`))
    expect(await countBuilds()).toBeGreaterThan(0)
    other.close()
  })

  it('finds its data again after the folder was moved', async () => {
    const first = await startUntilUp()
    const builds = await countBuilds()
    first.child.kill('SIGTERM')
    await first.ended
    const moved = beside(folder, 'moved checkout')
    renameSync(folder, moved)
    await startUntilUp({}, moved)
    expect(await countBuilds()).toBe(builds)
    expect(clusterFolder(moved)).toBe(join(moved, '.data', 'postgres'))
  })

  it.runIf(isRoot)('puts the database elsewhere when its user cannot reach the folder', async () => {
    const closed = join(base, 'closed')
    mkdirSync(closed, { mode: 0o700 })
    const inside = join(closed, 'checkout')
    renameSync(folder, inside)
    const first = await startUntilUp({}, inside)
    const cluster = clusterFolder(inside)
    places.push(join(cluster, '..'))
    expect(cluster).toMatch(/^\/var\/tmp\/longpull-[0-9a-f]{12}\/postgres$/)
    expect(first.output()).toContain(cluster)
    const builds = await countBuilds()
    first.child.kill('SIGTERM')
    await first.ended
    await startUntilUp({}, inside)
    expect(await countBuilds()).toBe(builds)
  })

  it('throws away a database folder that was never finished', async () => {
    mkdirSync(join(folder, '.data', 'postgres.making', 'base'), { recursive: true })
    writeFileSync(join(folder, '.data', 'postgres.making', 'PG_VERSION'), '15\n')
    const command = await startUntilUp()
    expect(command.output()).toMatch(/throwing away a database folder that was never finished/)
  })

  it('ends cleanly when it is interrupted half-way, whenever that is', async () => {
    for (const [index, moment] of [
      /Starting the database/,
      /Bringing the tables/,
      /Starting the application/,
    ].entries()) {
      const command = start()
      await command.until(moment)
      await sleep(index * 40)
      command.child.kill('SIGINT')
      // The same Ctrl-C, passed on by npm.
      command.child.kill('SIGINT')
      expect(await command.ended).toEqual({ code: 0, signal: null })
      await untilNobody(folder)
    }
    await startUntilUp()
    expect(await countBuilds()).toBeGreaterThan(0)
  })

  it('says so when the application dies, and stops the database', async () => {
    const command = await startUntilUp()
    const server = processesOf(folder).find((entry) => entry.command.includes('.output/server/index.mjs'))
    process.kill(server?.pid ?? 0, 'SIGKILL')
    expect((await command.ended).code).toBe(1)
    expect(command.output()).toMatch(/The application ended by itself \(SIGKILL\)[\s\S]*Ending the database/)
    await untilNobody(folder)
  })

  describe('with a database of its own choosing', () => {
    let env: Record<string, string>
    beforeAll(async () => {
      env = { ...(await createTestDatabase({ content: 'empty' })).env }
    })

    it('starts no server, and migrates and fills the one that is named', async () => {
      const command = await startUntilUp(env)
      expect(command.output()).not.toMatch(/Starting the database/)
      expect(existsSync(join(folder, '.data', 'postgres'))).toBe(false)
      expect(await countBuilds()).toBeGreaterThan(0)
    })

    it('asks for the owner’s address when that is missing', async () => {
      const command = start({ DATABASE_URL: env.DATABASE_URL ?? '' })
      expect((await command.ended).code).toBe(1)
      expect(command.output()).toMatch(/DATABASE_OWNER_URL is missing/)
    })
  })
})
