// @ts-check
import { existsSync, lstatSync, mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { chooseClusterFolder } from './cluster-place.mjs'
import { clusterMajor, startCluster, stopServer, THROWAWAY_SETTINGS } from './cluster.mjs'
import { Advice } from './packages.mjs'
import { findPostgres } from './postgres-programs.mjs'
import { processMark, stillRuns } from './processes.mjs'
import { loadSecrets, makeSecrets, writePrivate } from './secrets.mjs'
import { canReach, findServerUser } from './users.mjs'

/** @returns {import('./users.mjs').ServerUser} */
function requireServerUser() {
  const user = findServerUser()
  if (user !== undefined) return user
  throw new Advice(
    'PostgreSQL refuses to run as root, and there is no user "postgres" to run it as. Make one (useradd --system postgres) or start as another user.',
  )
}

/**
 * Brings up the database of this checkout: the cluster, the three roles, the database `longpull`.
 *
 * @param {{ root: string, progress: import('./progress.mjs').Progress, onStop: (stop: (mode: 'fast' | 'immediate') => Promise<void>) => void }} options
 *   onStop: given the way to stop it, before it is started, so that it is stopped however the start ends
 */
export async function startOwnDatabase({ root, progress, onStop }) {
  requireOwnFiles(join(root, '.data'))
  const stateFile = join(root, '.data', 'cluster.json')
  const state = readState(stateFile)
  const known = [state.folder, join(root, '.data', 'postgres')].filter((folder) => folder !== undefined)
  const wantedMajor = known.map(clusterMajor).find((major) => major !== undefined)
  const programs = await findPostgres({ progress, wantedMajor })
  const user = requireServerUser()
  return progress.step(`Starting the database (PostgreSQL ${programs.major})`, async () => {
    /** @param {string} text */
    const say = (text) => progress.say(`  ${text}`)
    const folder = await chooseClusterFolder({ root, user, remembered: state.folder, say })
    const secrets = loadSecrets(join(root, '.data', 'secrets.json'))
    // Noted before the cluster is made: where it lives must be known however this start ends.
    writePrivate(stateFile, `${JSON.stringify({ ...state, folder })}\n`)
    const plan = { folder, programs: programs.folder, user, secrets, port: state.port, say }
    onStop((mode) => stopServer(plan, mode))
    const cluster = await startCluster(plan)
    writePrivate(stateFile, `${JSON.stringify({ folder, port: cluster.port })}\n`)
    await cluster.ensureDatabase('longpull')
    return cluster
  })
}

/**
 * What another user's start command made can't be used, unless by root.
 *
 * @param {string} data
 */
function requireOwnFiles(data) {
  const self = process.getuid?.()
  if (self === undefined || self === 0) return
  for (const path of [data, join(data, 'secrets.json'), join(data, 'cluster.json'), join(data, 'postgres')]) {
    const info = lstatSync(path, { throwIfNoEntry: false })
    if (info !== undefined && info.uid !== self) {
      throw new Advice(
        `${path} belongs to another user (number ${info.uid}), whose start command made it. Start as that user or as root, or move the folder .data away to begin anew.`,
      )
    }
  }
}

/**
 * @param {string} file
 * @returns {{ folder?: string, port?: number }}
 */
function readState(file) {
  try {
    const { folder, port } = JSON.parse(readFileSync(file, 'utf8'))
    return {
      ...(typeof folder === 'string' ? { folder } : {}),
      ...(Number.isInteger(port) ? { port } : {}),
    }
  } catch {
    return {}
  }
}

const THROWAWAY_PREFIX = 'longpull-test-'

/**
 * A cluster for one run of the tests: its own folder, port and passwords, no waiting for the disk, and gone afterwards.
 * What an earlier run that was killed left behind is cleared away first.
 *
 * @param {{ progress: import('./progress.mjs').Progress, onStop?: (stop: () => Promise<void>) => void }} options
 *   onStop: given the way to take it down, before it is made
 */
export async function startThrowawayCluster({ progress, onStop }) {
  const programs = await findPostgres({ progress })
  const user = requireServerUser()
  let base
  for (const folder of ['/var/tmp', tmpdir()]) if (await canReach(user, folder)) base ??= folder
  if (base === undefined) throw new Advice(`user "${user.name}" can reach neither /var/tmp nor ${tmpdir()}`)
  await sweep(base, programs.folder, user)
  const home = join(base, `${THROWAWAY_PREFIX}${process.pid}-${Date.now().toString(36)}`)
  mkdirSync(home, { mode: 0o711 })
  writeFileSync(
    join(home, 'maker.json'),
    JSON.stringify({ pid: process.pid, mark: processMark(process.pid) }),
  )
  const plan = {
    folder: join(home, 'postgres'),
    programs: programs.folder,
    user,
    secrets: makeSecrets(),
    settings: THROWAWAY_SETTINGS,
  }
  const stop = async () => {
    await stopServer(plan, 'immediate')
    rmSync(home, { recursive: true, force: true })
  }
  onStop?.(stop)
  const cluster = await startCluster(plan)
  return { ...cluster, stop }
}

/**
 * @param {string} base
 * @param {string} programs
 * @param {import('./users.mjs').ServerUser} user
 */
async function sweep(base, programs, user) {
  for (const name of readdirSync(base).filter((entry) => entry.startsWith(THROWAWAY_PREFIX))) {
    const home = join(base, name)
    const maker = join(home, 'maker.json')
    if (!existsSync(maker) || stillRuns(JSON.parse(readFileSync(maker, 'utf8')))) continue
    await stopServer({ folder: join(home, 'postgres'), programs, user }, 'immediate')
    rmSync(home, { recursive: true, force: true })
  }
}
