// @ts-check
import { existsSync } from 'node:fs'
import { run } from './run.mjs'

/** Something a person has to do first; shown as it stands, without a stack. */
export class Advice extends Error {}

/**
 * Installs a Debian package where that can be done without asking, else says which one is wanted.
 *
 * @param {{ name: string, what: string, progress: import('./progress.mjs').Progress }} options
 */
export async function installDebianPackage({ name, what, progress }) {
  const apt = '/usr/bin/apt-get'
  if (process.getuid?.() !== 0 || !existsSync(apt)) {
    throw new Advice(
      `${what[0]?.toUpperCase()}${what.slice(1)} is missing. Install the package "${name}" (on Debian or Ubuntu: sudo apt-get install ${name}), then run this command again.`,
    )
  }
  const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive', LC_ALL: 'C.UTF-8' }
  const options = ['-o', 'DPkg::Lock::Timeout=300', '-o', 'Dpkg::Use-Pty=0']
  await progress.step(`Fetching the list of Debian packages`, (onLine) =>
    run({ command: apt, args: [...options, 'update'], env, onLine, finish: true }),
  )
  await progress.step(`Installing ${what} (package ${name})`, (onLine) =>
    run({
      command: apt,
      args: [...options, 'install', '-y', '--no-install-recommends', name],
      env,
      onLine,
      // A package manager cut off half-way leaves a mess that the next run stumbles over.
      finish: true,
    }),
  )
}
