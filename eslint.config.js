import eslint from '@eslint/js'
import prettier from 'eslint-config-prettier'
import vue from 'eslint-plugin-vue'
import typescript from 'typescript-eslint'

/* The arrows between the rooms: which may not know of which, and why. */
const otherRooms = {
  server: { regex: '(^|/)server/', message: 'The server is not known here: ask it over the API.' },
  client: { regex: '(^|/)src/', message: 'The client is not known here.' },
  contracts: {
    regex: '(^|/)contracts/',
    message: 'Calculations know nothing of the API: shared/check, form and work translate.',
  },
  packages: {
    regex: '^(?!\\.{1,2}/|#shared/)',
    message: 'shared/ stands alone: import only from within it.',
  },
  packagesButZod: {
    regex: '^(?!\\.{1,2}/|#shared/|zod$)',
    message: 'Contracts may use zod and nothing else.',
  },
  checkSchemas: {
    regex: '(^|/)contracts/(?!limits|cautions|permissions)',
    allowTypeImports: true,
    message: 'Only types, limits and codes: a schema would carry zod into the first script a phone loads.',
  },
}

function forbid(...rooms) {
  return { '@typescript-eslint/no-restricted-imports': ['error', { patterns: rooms }] }
}

const impureGlobals = [
  'process',
  'window',
  'document',
  'navigator',
  'fetch',
  'localStorage',
  'setTimeout',
].map((name) => ({ name, message: 'shared/ is pure: no clock, network, storage, DOM or Node.' }))
const impureProperties = [
  { object: 'Date', property: 'now', message: 'shared/ has no clock: pass the time in.' },
  { object: 'Math', property: 'random', message: 'shared/ is repeatable: pass the number in.' },
]
const impureSyntax = [
  { selector: 'NewExpression[callee.name="Date"][arguments.length=0]', message: 'shared/ has no clock.' },
]

export default typescript.config(
  { ignores: ['dist/', 'data/', 'node_modules/', 'migrations/', 'test-results/', 'playwright-report/'] },
  eslint.configs.recommended,
  typescript.configs.recommended,
  vue.configs['flat/recommended'],
  prettier,
  {
    files: ['**/*.ts', '**/*.vue'],
    languageOptions: { parserOptions: { parser: typescript.parser } },
    rules: {
      // The compiler knows every name, in the browser and in Node.
      'no-undef': 'off',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      '@typescript-eslint/consistent-type-imports': 'error',
      eqeqeq: 'error',
    },
  },
  {
    files: ['**/*.mjs', '*.js'],
    languageOptions: {
      globals: { console: 'readonly', process: 'readonly', URL: 'readonly', performance: 'readonly' },
    },
  },
  {
    files: ['src/public/*.js'],
    languageOptions: {
      sourceType: 'script',
      globals: Object.fromEntries(
        ['document', 'localStorage', 'matchMedia', 'navigator', 'location'].map((name) => [name, 'readonly']),
      ),
    },
  },
  // An absent optional prop is undefined, and the types say so.
  { files: ['**/*.vue'], rules: { 'vue/require-default-prop': 'off' } },
  { files: ['**/*.vue'], rules: { 'vue/block-lang': ['error', { script: { lang: 'ts' }, template: {} }] } },
  {
    files: ['shared/**/*.ts'],
    rules: {
      ...forbid(otherRooms.packages, otherRooms.server, otherRooms.client, otherRooms.contracts),
      'no-restricted-globals': ['error', ...impureGlobals],
      'no-restricted-properties': ['error', ...impureProperties],
      'no-restricted-syntax': ['error', ...impureSyntax],
    },
  },
  {
    files: ['shared/contracts/**/*.ts'],
    rules: forbid(otherRooms.packagesButZod, otherRooms.server, otherRooms.client),
  },
  {
    files: ['shared/{check,form,work}/**/*.ts'],
    rules: forbid(otherRooms.packages, otherRooms.server, otherRooms.client, otherRooms.checkSchemas),
  },
  { files: ['server/**/*.ts'], rules: forbid(otherRooms.client) },
  { files: ['src/**/*.{ts,vue}'], rules: forbid(otherRooms.server, otherRooms.checkSchemas) },
)
