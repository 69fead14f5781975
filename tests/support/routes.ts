import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { rootFolder } from '../../scripts/lib/paths.mjs'

/** A route of the built server; without a method it takes any. */
export interface BuiltRoute {
  path: string
  method: string | undefined
}

/** Reads the table of handlers out of the built server itself, so that no route can be left out of a test by hand. */
export function listBuiltRoutes(): BuiltRoute[] {
  const folder = join(rootFolder, '.output', 'server', 'chunks')
  const line =
    /\{ route: '([^']*)', handler: \w+, lazy: \w+, middleware: (\w+), method: (?:"(\w+)"|undefined) \}/g
  const routes = readdirSync(folder, { recursive: true, encoding: 'utf8' })
    .filter((name) => name.endsWith('.mjs'))
    .flatMap((name) => [...readFileSync(join(folder, name), 'utf8').matchAll(line)])
    .filter(([, path, middleware]) => path !== '' && middleware === 'false')
    .map(([, path = '', , method]) => ({ path, method: method?.toUpperCase() }))
  if (routes.length === 0)
    throw new Error('The built server has no table of handlers where it was looked for.')
  return routes
}
