// @ts-check
import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { run } from './run.mjs'

/**
 * Whether what is installed is what the lock file asks for. npm writes its own account of an installation into
 * node_modules when it is complete, so one cut off half-way has none.
 *
 * @param {string} root
 */
export function isInstallCurrent(root) {
  const wanted = join(root, 'package-lock.json')
  const installed = join(root, 'node_modules', '.package-lock.json')
  if (!existsSync(installed)) return false
  return matchesLock(readFileSync(wanted, 'utf8'), readFileSync(installed, 'utf8'))
}

/**
 * @param {string} wantedText package-lock.json
 * @param {string} installedText node_modules/.package-lock.json
 */
export function matchesLock(wantedText, installedText) {
  /** @typedef {Record<string, { version?: string, integrity?: string, optional?: boolean, devOptional?: boolean, link?: boolean }>} Packages */
  /** @type {Packages} */
  let wanted
  /** @type {Packages} */
  let installed
  try {
    wanted = JSON.parse(wantedText).packages
    installed = JSON.parse(installedText).packages
  } catch {
    return false
  }
  const paths = Object.keys(wanted).filter((path) => path !== '')
  const complete = paths.every((path) => {
    const want = wanted[path]
    const have = installed[path]
    // Builds for other systems are left out of an installation.
    if (have === undefined) return want?.optional === true || want?.devOptional === true
    return have.version === want?.version && have.integrity === want?.integrity
  })
  return complete && Object.keys(installed).every((path) => path in wanted)
}

/**
 * Installs the packages if they are not those of the lock file.
 *
 * @param {{ root: string, progress: import('./progress.mjs').Progress }} options
 */
export async function ensurePackages({ root, progress }) {
  if (isInstallCurrent(root)) return
  await progress.step('Installing the packages (npm ci, a minute or two)', async (report) => {
    // npm itself says nothing until it is through.
    const count = setInterval(() => report(`${countPackages(root)} packages are there`), 2000)
    try {
      await run({
        ...npm(['ci', '--include=dev', '--no-audit', '--no-fund']),
        cwd: root,
        onLine: report,
        leashed: true,
      })
    } finally {
      clearInterval(count)
    }
  })
}

/** @param {string} root */
function countPackages(root) {
  const folder = join(root, 'node_modules')
  /** @param {string} path */
  const names = (path) => (existsSync(path) ? readdirSync(path).filter((name) => !name.startsWith('.')) : [])
  return names(folder).reduce(
    (sum, name) => sum + (name.startsWith('@') ? names(join(folder, name)).length : 1),
    0,
  )
}

/**
 * @param {readonly string[]} args
 * @returns {{ command: string, args: readonly string[] }}
 */
function npm(args) {
  // The npm that runs this script, where one does: it need not be on the search path.
  const path = process.env.npm_execpath
  if (path !== undefined && path.endsWith('npm-cli.js'))
    return { command: process.execPath, args: [path, ...args] }
  return { command: 'npm', args }
}
