// @ts-check
import withNuxt from './.nuxt/eslint.config.mjs'

/** Directions of imports: each floor names what it must not reach. */
const bans = (...patterns) => ['error', { patterns: patterns.map(([group, message]) => ({ group, message })) }]

const OUTSIDE = [['#server', '#server/*', '~~/server/*', '**/server/**'], 'The server is reached by HTTP alone.']
const SQL = [['kysely', 'better-sqlite3', '#server/database/*'], 'SQL stands in repositories.']
const FAKES = [['#fakes/*', '**/fakes/**', '#tests/*', '**/tests/**'], 'The product knows nothing of its stand-ins and tests.']

const noTransaction = {
  selector: 'CallExpression[callee.property.name=\'transaction\']',
  message: 'Only inTransaction() of server/database/transaction.ts: it guards what SQLite cannot.',
}
const noClock = [
  { selector: 'MemberExpression[object.name=\'Date\'][property.name=\'now\']', message: 'Time comes from ctx.nowMs or the clock adapter.' },
  { selector: 'NewExpression[callee.name=\'Date\'][arguments.length=0]', message: 'Time comes from ctx.nowMs or the clock adapter.' },
]
const noChance = { selector: 'MemberExpression[object.name=\'Math\'][property.name=\'random\']', message: 'Ids and secrets come from server/ids.ts; the domain takes numbers.' }
const noProcess = { selector: 'Identifier[name=\'process\']', message: 'Settings are read in server/settings.ts alone.' }
const noFetch = { selector: 'Identifier[name=\'$fetch\']', message: 'A composable or store owns the address.' }
const noCast = {
  selector: 'TSAsExpression:not([typeAnnotation.typeName.name=\'const\'])',
  message: 'Check instead of asserting: a type guard, a schema, or satisfies.',
}
const noTypeEscape = [noCast, { selector: 'TSNonNullExpression', message: 'Check instead of asserting.' }, { selector: 'TSTypeAssertion', message: 'Check instead of asserting.' }]

export default withNuxt(
  {
    rules: {
      'vue/multi-word-component-names': 'off',
      'vue/no-v-html': 'off',
      'no-console': 'error',
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/ban-ts-comment': ['error', { 'ts-expect-error': true, 'ts-ignore': true, 'ts-nocheck': true }],
      'max-lines': ['error', { max: 250, skipComments: false }],
      'max-lines-per-function': ['error', { max: 50, skipBlankLines: true, skipComments: true }],
      'no-restricted-syntax': ['error', ...noTypeEscape, noTransaction],
      '@stylistic/max-statements-per-line': 'off',
      'import/no-self-import': 'error',
    },
  },
  // The floors, from the bottom up.
  {
    files: ['shared/**/*.ts'],
    rules: { 'no-restricted-imports': bans(OUTSIDE, FAKES, [['vue', 'vue-router', 'pinia', 'nuxt', 'h3', 'kysely', 'node:*', '#imports', '~/*'], 'What both floors share owns nothing of either.']) },
  },
  {
    files: ['shared/domain/**/*.ts'],
    rules: {
      'no-restricted-imports': bans(OUTSIDE, FAKES, [['vue', 'vue-router', 'pinia', 'nuxt', 'h3', 'kysely', 'node:*', '#imports', '~/*', 'zod', '#shared/schemas/*', '#shared/types/*'], 'The domain takes numbers and plain objects.']),
      'no-restricted-globals': ['error', 'window', 'document', 'navigator', 'process', 'fetch', 'setTimeout', 'setInterval'],
      'no-restricted-syntax': ['error', ...noTypeEscape, noChance, ...noClock],
    },
  },
  {
    files: ['server/**/*.ts'],
    ignores: ['server/settings.ts', 'server/plugins/0.start.ts', 'server/commands/**', 'server/adapters/clock.ts'],
    rules: { 'no-restricted-syntax': ['error', ...noTypeEscape, noTransaction, noChance, noProcess, ...noClock], 'no-restricted-imports': bans(FAKES) },
  },
  {
    files: ['server/api/**/*.ts', 'server/routes/**/*.ts'],
    rules: {
      'max-lines': ['error', { max: 40 }],
      'no-restricted-imports': bans(FAKES, SQL, [['#server/features/**/*.repository', '#server/adapters/*'], 'A handler calls one service.']),
    },
  },
  {
    files: ['server/features/**/*.ts'],
    ignores: ['server/features/**/*.repository.ts', 'server/features/**/*.policy.ts', 'server/features/reading/**'],
    rules: { 'no-restricted-imports': bans(FAKES, [['better-sqlite3'], 'SQL stands in repositories.']) },
  },
  {
    files: ['server/database/transaction.ts'],
    rules: { 'no-restricted-syntax': ['error', ...noTypeEscape] },
  },
  {
    files: ['app/**/*.{ts,vue}'],
    rules: {
      'no-restricted-imports': bans(OUTSIDE, FAKES, [['kysely', 'node:*', 'stripe', '@aws-sdk/*'], 'This does not run in a browser.']),
      'no-restricted-syntax': ['error', ...noTypeEscape, noProcess, noFetch],
    },
  },
  {
    files: ['app/{composables,stores,plugins}/**/*.ts'],
    rules: { 'no-restricted-syntax': ['error', ...noTypeEscape, noProcess], 'max-lines': ['error', { max: 150 }], 'max-lines-per-function': 'off' },
  },
  { files: ['app/components/**/*.vue'], rules: { 'max-lines': ['error', { max: 200 }] } },
  { files: ['app/pages/**/*.vue', 'app/layouts/**/*.vue'], rules: { 'max-lines': ['error', { max: 120 }] } },
  {
    files: ['tests/**/*.ts'],
    rules: { 'max-lines': 'off', 'max-lines-per-function': 'off', 'no-console': 'off', 'no-restricted-syntax': ['error', ...noTypeEscape] },
  },
  // One long statement each; splitting a schema by lines would hide it.
  { files: ['server/database/migrations/*.ts'], rules: { 'max-lines-per-function': 'off' } },
  { files: ['fakes/**/*.ts', 'server/commands/**/*.ts', 'tests/run.ts', 'tests/bench/**', 'tests/faults/**'], rules: { 'no-console': 'off' } },
  { files: ['server/plugins/0.start.ts', 'server/error.ts'], rules: { 'no-console': 'off' } },
)
