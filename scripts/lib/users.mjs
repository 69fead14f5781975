// @ts-check
import { readFileSync } from 'node:fs'
import { userInfo } from 'node:os'
import { run } from './run.mjs'

/**
 * Whom the database server runs as. It refuses to run as root, so root lends it to Debian's `postgres`; anyone else
 * runs it as themselves.
 *
 * @typedef {{ name: string, uid?: number, gid?: number, home: string }} ServerUser
 * @returns {ServerUser | undefined} undefined for root on a machine that has no such user yet
 */
export function findServerUser() {
  if (process.getuid?.() !== 0) {
    const { username, homedir } = userInfo()
    return { name: username, home: homedir }
  }
  return parsePasswd(readFileSync('/etc/passwd', 'utf8'), 'postgres')
}

/**
 * @param {string} passwd the text of /etc/passwd
 * @param {string} name
 * @returns {ServerUser | undefined}
 */
export function parsePasswd(passwd, name) {
  const line = passwd.split('\n').find((entry) => entry.startsWith(`${name}:`))
  if (line === undefined) return undefined
  const [, , uid, gid, , home] = line.split(':')
  return { name, uid: Number(uid), gid: Number(gid), home: home ?? '/' }
}

/**
 * The part of a command's options that runs it as that user. The password-free switch of user ids by the system call
 * needs no program such as runuser or su, which small images may lack.
 *
 * @param {ServerUser} user
 */
export function asUser(user) {
  return user.uid === undefined ? {} : { uid: user.uid, gid: user.gid }
}

/**
 * Whether that user can reach a folder: every folder above it must let them pass.
 *
 * @param {ServerUser} user
 * @param {string} folder
 */
export async function canReach(user, folder) {
  const { code } = await run({
    command: '/bin/sh',
    args: ['-c', 'cd "$1"', 'sh', folder],
    cwd: '/',
    env: { PATH: process.env.PATH },
    user: asUser(user),
    finish: true,
    mayFail: true,
  })
  return code === 0
}
