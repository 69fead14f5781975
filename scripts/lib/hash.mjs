// @ts-check
import { createHash } from 'node:crypto'
import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs'
import { join } from 'node:path'

/**
 * One hash over names and contents of files and folders (folders whole, in a fixed order). Times and permissions do
 * not count: a fresh clone has the hash of the checkout it was cloned from.
 *
 * @param {string} root
 * @param {readonly string[]} paths relative to the root; one that is missing counts as missing
 */
export function hashPaths(root, paths) {
  const hash = createHash('sha256')
  for (const path of [...paths].sort()) {
    for (const file of listFiles(root, path)) {
      const content = readFileSync(join(root, file))
      // Lengths between the parts: no two different trees run together into the same bytes.
      hash.update(`${file}\0${content.length}\0`).update(content)
    }
  }
  return hash.digest('hex')
}

/**
 * @param {string} root
 * @param {string} path
 * @returns {string[]} the files at or below the path, relative to the root, sorted
 */
export function listFiles(root, path) {
  const full = join(root, path)
  if (!existsSync(full)) return []
  if (!statSync(full).isDirectory()) return [path]
  return readdirSync(full)
    .filter((name) => !name.startsWith('.') && name !== 'node_modules')
    .sort()
    .flatMap((name) => listFiles(root, `${path}/${name}`))
}
