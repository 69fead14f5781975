import { existsSync } from 'node:fs'
import { basename, join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { rootFolder } from '../../../scripts/lib/paths.mjs'
import { isCode, listProjectFiles, readSource } from './sources'

const files = listProjectFiles()
const text = files.filter((path) => !/\.(woff2?|png|ico|jpg|pdf)$/.test(path))
const inRooms = (paths: string[], pattern: RegExp) => paths.filter((path) => pattern.test(path))
const app =
  /^(app\.vue|error\.vue|(pages|components|layouts|middleware|composables|stores|utils|workers|plugins|shared|server)\/)/
const client =
  /^(app\.vue|error\.vue|nuxt\.config\.ts|(pages|components|layouts|middleware|composables|stores|utils|workers|plugins|assets|public)\/)/
/** This folder's own files name what they forbid. */
const exceptHouse = (path: string) => !path.startsWith('tests/unit/house/')

/** Every place where a pattern occurs, as path and line. */
function findLines(paths: string[], pattern: RegExp): string[] {
  return paths.flatMap((path) =>
    readSource(path)
      .split('\n')
      .flatMap((line, index) => (pattern.test(line) ? [`${path}:${index + 1}: ${line.trim()}`] : [])),
  )
}

describe('layout', () => {
  it('has no folder app/, which the framework would silently take as the source folder', () => {
    expect(existsSync(join(rootFolder, 'app'))).toBe(false)
  })

  it('names components in PascalCase and everything else in kebab-case', () => {
    const component = /^[A-Z][A-Za-z0-9]+\.vue$/
    // A route's file also carries the method, or a parameter in brackets; a test ends in .test.ts.
    const plain = /^(\[[a-zA-Z.]+\]|[a-z0-9]+(-[a-z0-9]+)*)(\.[a-z0-9-]+)*$/
    const migration = /^\d{14}_[a-z0-9]+(_[a-z0-9]+)+\.ts$/
    const wellKnown = /^(README|DEVELOPERS|LICENSE)(\.md|\.txt)?$/
    const wrong = files.filter((path) => {
      const name = basename(path)
      if (path.startsWith('components/')) return !component.test(name)
      if (path.startsWith('server/db/migrations/')) return !migration.test(name)
      return !name.startsWith('.') && !plain.test(name) && !wellKnown.test(name)
    })
    expect(wrong).toEqual([])
  })

  it('has no two migrations of the same stamp', () => {
    const stamps = inRooms(files, /^server\/db\/migrations\//).map((path) => basename(path).slice(0, 14))
    expect(stamps.length).toBeGreaterThan(0)
    expect(stamps.filter((stamp, index) => stamps.indexOf(stamp) !== index)).toEqual([])
  })
})

describe('the project stands alone', () => {
  it('names no package registry, in the lock file or elsewhere', () => {
    expect(findLines(['package-lock.json'], /"resolved"/)).toEqual([])
    expect(findLines(text.filter(exceptHouse), /\bregistry\.[a-z0-9-]+\.[a-z]{2,}/i)).toEqual([])
  })

  it('names no folder outside itself', () => {
    const outside = new RegExp(['', '(work|home|Users)', ''].join('/'))
    expect(findLines(text.filter(exceptHouse), outside)).toEqual([])
  })

  it('fetches nothing from elsewhere: fonts, icons and scripts are its own', () => {
    // Names ending in .test and .invalid lead nowhere (RFC 2606).
    const elsewhere = /https?:\/\/(?!www\.w3\.org\/|localhost|127\.0\.0\.1|[a-z.-]+\.(test|invalid)\b)/
    const files = inRooms(text, client).filter((path) => basename(path) !== 'LICENSE.txt')
    expect(findLines(files, elsewhere)).toEqual([])
  })
})

describe('habits', () => {
  const code = files.filter(isCode)

  it('leaves nothing for later and silences no check', () => {
    const forbidden = /\b(TODO|FIXME|XXX)\b|@ts-(ignore|nocheck|expect-error)|eslint-disable/
    expect(findLines(code.filter(exceptHouse), forbidden)).toEqual([])
  })

  it('uses no any', () => {
    expect(findLines(code.filter(exceptHouse), /\bas any\b|:\s*any\b(?!\w)|<any>|\bany\[\]/)).toEqual([])
  })

  it('runs all of its tests', () => {
    const narrowed = /\b(it|test|describe)\.(skip|only|todo)\b|\b(xit|xdescribe|fit|fdescribe)\(/
    expect(findLines(inRooms(code, /^tests\//).filter(exceptHouse), narrowed)).toEqual([])
  })

  it('prints nothing from the application but through its log', () => {
    expect(findLines(inRooms(code, app), /\bconsole\.(log|info|debug|warn|error)\(/)).toEqual([])
  })
})

describe('tenants', () => {
  const server = inRooms(files, /^server\//).filter(isCode)
  const withoutComments = (path: string) =>
    readSource(path)
      .replace(/\/\*[\s\S]*?\*\//g, '')
      .replace(/(^|\s)\/\/.*$/gm, '')

  it('has a server to look at', () => {
    expect(server.length).toBeGreaterThan(20)
  })

  it('never sets anything for longer than a transaction', () => {
    const wrong = server.filter((path) => {
      const source = withoutComments(path)
      return (
        /set_config\([^)]*,\s*false\s*\)/i.test(source) ||
        /['"`;]\s*set\s+(?!local\b)(session\b|role\b|[a-z_.]+\s*(=|to)\s)/i.test(source)
      )
    })
    expect(wrong).toEqual([])
  })

  it('has no way to the database but the one wrapper', () => {
    const wrong = findLines(
      inRooms(server, /^server\/(?!db\/)/),
      /^(?!import type\b|import \{ closeDatabase \}).*\bfrom ['"](knex|pg|.*\/db\/connection)['"]/,
    )
    expect(wrong).toEqual([])
  })
})
