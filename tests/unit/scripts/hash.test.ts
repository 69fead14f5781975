import { mkdirSync, mkdtempSync, rmSync, utimesSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { hashPaths, listFiles } from '../../../scripts/lib/hash.mjs'
import { isBuildCurrent, hashSources } from '../../../scripts/lib/build.mjs'

let root: string
const write = (path: string, text: string) => {
  mkdirSync(join(root, path, '..'), { recursive: true })
  writeFileSync(join(root, path), text)
}

beforeEach(() => {
  root = mkdtempSync(join(tmpdir(), 'longpull-hash-'))
  write('pages/index.vue', '<template />')
  write('pages/deep/other.vue', '<template />')
  write('app.vue', 'a')
})
afterEach(() => rmSync(root, { recursive: true }))

describe('the hash of the sources', () => {
  const hash = () => hashPaths(root, ['app.vue', 'pages', 'missing'])

  it('lists a folder whole, in order, without hidden files', () => {
    write('pages/.draft', 'x')
    expect(listFiles(root, 'pages')).toEqual(['pages/deep/other.vue', 'pages/index.vue'])
  })

  it('does not depend on times or on the order asked in', () => {
    const before = hash()
    utimesSync(join(root, 'app.vue'), 0, 0)
    expect(hash()).toBe(before)
    expect(hashPaths(root, ['pages', 'missing', 'app.vue'])).toBe(before)
  })

  it.each([
    ['a changed content', () => write('app.vue', 'b')],
    ['a new file', () => write('pages/new.vue', '')],
    ['a removed file', () => rmSync(join(root, 'pages/index.vue'))],
    ['a folder that appears', () => write('missing/x', '')],
    [
      'a content that moves from one file to another',
      () => {
        write('pages/deep/other.vue', '')
        write('pages/index.vue', '<template /><template />')
      },
    ],
  ])('changes with %s', (_, change) => {
    const before = hash()
    change()
    expect(hash()).not.toBe(before)
  })
})

describe('the judgement of a build', () => {
  const stamp = (text: string) => write('.output/longpull-build.json', text)

  beforeEach(() => {
    write('.output/server/index.mjs', 'served')
    stamp(JSON.stringify({ sources: hashSources(root) }))
  })

  it('takes a build of the present sources', () => expect(isBuildCurrent(root)).toBe(true))

  it.each([
    ['changed sources', () => write('app.vue', 'changed')],
    ['no stamp: cut off half-way', () => rmSync(join(root, '.output/longpull-build.json'))],
    ['a stamp cut off half-way', () => stamp('{"sour')],
    ['no server', () => rmSync(join(root, '.output/server'), { recursive: true })],
  ])('refuses one with %s', (_, change) => {
    change()
    expect(isBuildCurrent(root)).toBe(false)
  })
})
