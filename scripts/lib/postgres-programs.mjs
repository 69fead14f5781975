// @ts-check
import { existsSync, readdirSync, realpathSync } from 'node:fs'
import { delimiter, dirname, join } from 'node:path'
import { Advice, installDebianPackage } from './packages.mjs'
import { run } from './run.mjs'

/** Views that obey the row rules of whoever asks (`security_invoker`) came with this version. */
const OLDEST_MAJOR = 15

/**
 * The folders that hold PostgreSQL's server programs. Debian keeps them out of the search path.
 *
 * @param {{ debianFolder?: string, path?: string }} [options]
 * @returns {string[]}
 */
export function listProgramFolders(options = {}) {
  const debianFolder = options.debianFolder ?? '/usr/lib/postgresql'
  const path = options.path ?? process.env.PATH ?? ''
  const debian = existsSync(debianFolder)
    ? readdirSync(debianFolder).map((version) => join(debianFolder, version, 'bin'))
    : []
  const onPath = path.split(delimiter).filter((folder) => folder.startsWith('/'))
  const found = [...debian, ...onPath]
    .filter((folder) => ['initdb', 'pg_ctl', 'postgres'].every((name) => existsSync(join(folder, name))))
    // A link such as /usr/bin/initdb: the real folder holds the other programs too.
    .map((folder) => dirname(realpathSync(join(folder, 'postgres'))))
  return [...new Set(found)]
}

/**
 * @param {string} text what `postgres --version` prints
 * @returns {number | undefined}
 */
export function parseMajor(text) {
  const match = /PostgreSQL\D*(\d+)/.exec(text)
  return match === null ? undefined : Number(match[1])
}

/**
 * Of the versions found, the one that made the cluster; for a new cluster the newest.
 *
 * @template {{ major: number }} T
 * @param {readonly T[]} found
 * @param {number | undefined} wantedMajor
 */
export function pickVersion(found, wantedMajor) {
  const fit = found.filter(({ major }) =>
    wantedMajor === undefined ? major >= OLDEST_MAJOR : major === wantedMajor,
  )
  return fit.sort((a, b) => b.major - a.major)[0]
}

/**
 * Finds the server programs, installing Debian's package when there are none and that can be done.
 *
 * @param {{ progress: import('./progress.mjs').Progress, wantedMajor?: number, whenMissing?: typeof installDebianPackage }} options
 */
export async function findPostgres({ progress, wantedMajor, whenMissing = installDebianPackage }) {
  const first = pickVersion(await listVersions(), wantedMajor)
  if (first !== undefined) return first
  const name = wantedMajor === undefined ? 'postgresql' : `postgresql-${wantedMajor}`
  await whenMissing({ name, what: 'the PostgreSQL server', progress })
  const second = pickVersion(await listVersions(), wantedMajor)
  if (second !== undefined) return second
  throw new Advice(
    `No PostgreSQL server of version ${wantedMajor ?? `${OLDEST_MAJOR} or later`} was found in /usr/lib/postgresql or on the PATH. Install the package "${name}".`,
  )
}

async function listVersions() {
  const versions = []
  for (const folder of listProgramFolders()) {
    const { stdout } = await run({
      command: join(folder, 'postgres'),
      args: ['--version'],
      finish: true,
      mayFail: true,
    })
    const major = parseMajor(stdout)
    if (major !== undefined) versions.push({ folder, major, version: stdout.trim() })
  }
  return versions
}
