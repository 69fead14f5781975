import { describe, expect, it } from 'vitest'
import { judgeImport } from './rooms'
import { isCode, listImports, listProjectFiles } from './sources'

const codeFiles = listProjectFiles().filter(isCode)
const everyImport = codeFiles.flatMap((path) => listImports(path).map((found) => ({ path, found })))

describe('the rooms of the house', () => {
  it('holds enough files for the walk to mean something', () => {
    expect(codeFiles.length).toBeGreaterThan(50)
  })

  it('has no import that a room may not make', () => {
    const wrong = everyImport.flatMap(({ path, found }) => judgeImport(path, found) ?? [])
    expect([...new Set(wrong)]).toEqual([])
  })

  it('has no import that leads out of the project', () => {
    const wrong = everyImport
      .filter(({ found }) => found.target?.startsWith('..') || /^(\/|file:)/.test(found.specifier))
      .map(({ path, found }) => `${path}: ${found.specifier}`)
    expect(wrong).toEqual([])
  })
})

/** One line of code in a file of that name, and what the walk makes of it. */
function judge(path: string, source: string): string[] {
  return listImports(path, source).flatMap((found) => judgeImport(path, found) ?? [])
}

describe('the walk itself', () => {
  it.each([
    ['a page importing the server', 'pages/index.vue', 'import x from "~/server/db/connection"'],
    [
      'a component importing the server by a relative path',
      'components/a/A.vue',
      'import x from "../../server/x"',
    ],
    ['a component importing a store', 'components/a/A.vue', 'import { useX } from "~/stores/x"'],
    ['a page importing a module of Node', 'pages/index.vue', 'import { join } from "node:path"'],
    ['the heat model importing Vue', 'shared/heat/a.ts', 'import { ref } from "vue"'],
    ['the heat model importing the framework', 'shared/heat/a.ts', 'import { useX } from "#imports"'],
    ['the heat model importing a schema', 'shared/heat/a.ts', 'import { XSchema } from "../schemas/x"'],
    ['the heat model importing zod for its types', 'shared/heat/a.ts', 'import type { z } from "zod"'],
    ['a unit importing anything', 'shared/units/a.ts', 'import { AppError } from "../errors"'],
    ['a handler importing a repository', 'server/api/a.get.ts', 'import { x } from "../repositories/x"'],
    [
      'a handler importing the database',
      'server/api/a.get.ts',
      'import { x } from "~~/server/db/connection"',
    ],
    [
      'a service importing the raw connection',
      'server/services/a.ts',
      'import { x } from "../db/connection"',
    ],
    ['a service importing a handler’s helper', 'server/services/a.ts', 'import { x } from "../utils/x"'],
    ['a repository importing knex', 'server/repositories/a.ts', 'import knex from "knex"'],
    ['a dynamic import', 'pages/index.vue', 'const x = await import("~/server/x")'],
    ['a re-export', 'utils/a.ts', 'export { x } from "../stores/x"'],
    ['a file in no room', 'lib/a.ts', 'import x from "vue"'],
  ])('refuses %s', (_, path, code) => {
    const source = path.endsWith('.vue') ? `<script setup lang="ts">\n${code}\n</script>` : code
    expect(judge(path, source)).toHaveLength(1)
  })

  it.each([
    ['a page importing a component', 'pages/index.vue', 'import A from "~/components/a/A.vue"'],
    ['a component importing a schema', 'components/a/A.vue', 'import type { X } from "#shared/schemas/x"'],
    [
      'the heat model importing types of a schema',
      'shared/heat/a.ts',
      'import type { X } from "../schemas/x"',
    ],
    ['the same with the word beside the name', 'shared/heat/a.ts', 'import { type X } from "../schemas/x"'],
    ['the heat model importing a unit', 'shared/heat/a.ts', 'import { x } from "../units/temperature"'],
    ['a service opening a transaction', 'server/services/a.ts', 'import { withShop } from "../db/with-shop"'],
    ['a repository naming the type of one', 'server/repositories/a.ts', 'import type { Knex } from "knex"'],
    ['the database folder importing knex', 'server/db/connection.ts', 'import knex from "knex"'],
    ['a test importing anything', 'tests/unit/a.test.ts', 'import { x } from "../../server/db/x"'],
  ])('allows %s', (_, path, code) => {
    const source = path.endsWith('.vue') ? `<script setup lang="ts">\n${code}\n</script>` : code
    expect(judge(path, source)).toEqual([])
  })
})
