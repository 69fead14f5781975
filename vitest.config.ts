import { defineVitestProject } from '@nuxt/test-utils/config'
import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const root = fileURLToPath(new URL('.', import.meta.url))
const alias = { '#shared': `${root}shared`, '~': root.replace(/\/$/, ''), '~~': root.replace(/\/$/, '') }

const cluster = './tests/support/setup-cluster.ts'
const build = './tests/support/setup-build.ts'
/** What takes minutes: `npm run test:deep`. */
const deep = '**/*.deep.test.ts'

/** A project of tests that run in Node, one file after the other where they share a server or a machine's load. */
const nodeProject = (
  name: string,
  settings: {
    include: string[]
    exclude?: string[]
    globalSetup?: string[]
    setupFiles?: string[]
    testTimeout?: number
    hookTimeout?: number
    fileParallelism?: boolean
  },
) => ({ resolve: { alias }, test: { name, environment: 'node' as const, exclude: [deep], ...settings } })

/** Projects by what they need: nothing, a Vue environment, PostgreSQL, a served application, a browser. */
export default defineConfig({
  test: {
    // Both cores of a small machine: nothing else runs beside the tests.
    maxWorkers: '100%',
    projects: [
      nodeProject('unit', {
        include: ['tests/unit/**/*.test.ts', 'tests/model/**/*.test.ts'],
        setupFiles: ['tests/support/setup-seed.ts'],
        testTimeout: 20_000,
      }),
      await defineVitestProject({
        test: { name: 'nuxt', environment: 'nuxt', include: ['tests/nuxt/**/*.test.ts'], exclude: [deep] },
      }),
      nodeProject('db', {
        include: ['tests/db/**/*.test.ts'],
        globalSetup: [cluster],
        fileParallelism: false,
        testTimeout: 30_000,
        hookTimeout: 120_000,
      }),
      nodeProject('api', {
        include: ['tests/api/**/*.test.ts'],
        globalSetup: [cluster, build],
        fileParallelism: false,
        testTimeout: 60_000,
        hookTimeout: 120_000,
      }),
      nodeProject('browser', {
        include: ['tests/browser/**/*.test.ts'],
        globalSetup: [cluster, build],
        fileParallelism: false,
        testTimeout: 120_000,
        hookTimeout: 120_000,
      }),
      nodeProject('deep', {
        include: [`tests/${deep}`],
        exclude: [],
        globalSetup: [cluster, build],
        fileParallelism: false,
        testTimeout: 600_000,
        hookTimeout: 600_000,
      }),
    ],
  },
})
