import withNuxt from './.nuxt/eslint.config.mjs'

/**
 * The rooms of the house and what each may import. A page importing a server file builds without an error, so it is a
 * lint error here; tests/unit/house/imports.test.ts walks the imports of every file as well.
 */
const forbid = (...patterns) => ({
  'no-restricted-imports': ['error', { patterns: patterns.map(([group, message]) => ({ group, message })) }],
})
const knexOnlyInDb = [
  ['knex', 'knex/*', 'pg', 'pg-*'],
  'Only server/db may import knex; everything else gets a trx from withShop().',
]
const noServer = [['**/server/**', '~/server/**', '~~/server/**'], 'Client code never imports the server.']

export default withNuxt(
  { ignores: ['.data/**', '.output/**', 'coverage/**'] },
  {
    files: ['**/*.ts', '**/*.vue'],
    rules: {
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/consistent-type-imports': 'error',
    },
  },
  {
    rules: {
      'no-console': 'error',
      'vue/multi-word-component-names': 'off',
      'vue/html-self-closing': 'off',
      // An optional prop without a default is undefined, and its type says so.
      'vue/require-default-prop': 'off',
      'vue/no-v-html': 'error',
    },
  },
  { files: ['scripts/**', 'tests/**'], rules: { 'no-console': 'off' } },
  {
    files: [
      'app.vue',
      'error.vue',
      'pages/**',
      'components/**',
      'layouts/**',
      'composables/**',
      'stores/**',
      'utils/**',
      'plugins/**',
      'middleware/**',
      'workers/**',
    ],
    rules: forbid(noServer, knexOnlyInDb),
  },
  {
    files: ['shared/**'],
    rules: forbid(noServer, knexOnlyInDb, [
      ['vue', 'h3', 'nitropack', '#imports', '~/*'],
      'shared/ is pure TypeScript.',
    ]),
  },
  {
    files: ['server/**'],
    ignores: ['server/db/**'],
    rules: {
      '@typescript-eslint/no-restricted-imports': [
        'error',
        { patterns: [{ group: ['knex', 'pg'], message: knexOnlyInDb[1], allowTypeImports: true }] },
      ],
    },
  },
)
