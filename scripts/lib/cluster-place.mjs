// @ts-check
import { createHash } from 'node:crypto'
import {
  chmodSync,
  cpSync,
  existsSync,
  lstatSync,
  mkdirSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs'
import { dirname, join } from 'node:path'
import { clusterMajor } from './cluster.mjs'
import { Advice } from './packages.mjs'
import { inspectLock } from './postmaster.mjs'
import { canReach } from './users.mjs'

const SHARED_PLACE = '/var/tmp'

/**
 * Where the cluster of a checkout lives when the server's user can't reach the checkout.
 *
 * @param {string} root
 */
export function placeElsewhere(root) {
  const hash = createHash('sha256').update(root).digest('hex').slice(0, 12)
  return join(SHARED_PLACE, `longpull-${hash}`)
}

/**
 * Finds the place of this checkout's cluster: in `.data`, or under /var/tmp when a folder above the checkout is closed
 * to the server's user. A place used before is kept when the checkout has been moved, and left alone when this checkout
 * is a copy of the one it belongs to.
 *
 * @param {{ root: string, user: import('./users.mjs').ServerUser, remembered?: string, say: (text: string) => void }} options
 * @returns {Promise<string>} the data folder; the one above it exists and can be reached
 */
export async function chooseClusterFolder({ root, user, remembered, say }) {
  const data = join(root, '.data')
  const inside = join(data, 'postgres')
  mkdirSync(data, { recursive: true })
  // To be passed through by the server's user; what is private in it has modes of its own.
  chmodSync(data, (statSync(data).mode & 0o777) | 0o711)

  if (
    remembered !== undefined &&
    dirname(dirname(remembered)) === SHARED_PLACE &&
    clusterMajor(remembered) !== undefined
  ) {
    if (adopts(dirname(remembered), root)) {
      say(`the database is in ${remembered}, where it was made`)
      return remembered
    }
  }
  if (await canReach(user, data)) return inside

  const elsewhere = placeElsewhere(root)
  makeSafeFolder(elsewhere, user)
  const folder = join(elsewhere, 'postgres')
  if (clusterMajor(inside) !== undefined && clusterMajor(folder) === undefined) {
    if ((await inspectLock(inside, user)).judgement === 'serving') {
      throw new Advice(
        `The database in ${inside} is in use, but user "${user.name}" can no longer reach it. Move the folder back, end Longpull, then move it.`,
      )
    }
    say(`moving the database to ${folder}: user "${user.name}", who runs it, can't reach ${root}`)
    moveFolder(inside, folder)
  } else {
    say(`the database goes to ${folder}: user "${user.name}", who runs it, can't reach ${root}`)
  }
  writeFileSync(join(elsewhere, 'checkout'), `${root}\n`)
  return folder
}

/**
 * Whether a place under /var/tmp is this checkout's: it names it, or names one that is no longer there, which was then
 * moved here.
 *
 * @param {string} place
 * @param {string} root
 */
function adopts(place, root) {
  const file = join(place, 'checkout')
  if (!existsSync(file) || !ownedByUs(place)) return false
  const owner = readFileSync(file, 'utf8').trim()
  if (owner === root) return true
  if (existsSync(join(owner, '.data', 'cluster.json'))) return false
  writeFileSync(file, `${root}\n`)
  return true
}

/**
 * Anyone may make a folder in /var/tmp: one of that name made by somebody else is not used.
 *
 * @param {string} place
 * @param {import('./users.mjs').ServerUser} user
 */
function makeSafeFolder(place, user) {
  if (!existsSync(place)) mkdirSync(place, { mode: 0o711 })
  if (!ownedByUs(place)) {
    throw new Advice(
      `${place} should hold the database, since user "${user.name}" can't reach this folder, but it belongs to somebody else. Remove it, or put the checkout where "${user.name}" can reach it.`,
    )
  }
  chmodSync(place, 0o711)
}

/** @param {string} place */
function ownedByUs(place) {
  const info = lstatSync(place)
  return info.isDirectory() && info.uid === process.getuid?.()
}

/**
 * @param {string} from
 * @param {string} to
 */
function moveFolder(from, to) {
  try {
    renameSync(from, to)
  } catch (error) {
    if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EXDEV') throw error
    // Another file system: the copy gets its name only when whole. Whose it is, is seen to when the cluster starts.
    const draft = `${to}.making`
    rmSync(draft, { recursive: true, force: true })
    cpSync(from, draft, { recursive: true, verbatimSymlinks: true })
    renameSync(draft, to)
    rmSync(from, { recursive: true })
  }
}
