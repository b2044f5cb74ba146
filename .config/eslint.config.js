import { resolve } from 'node:path'
import js from '@eslint/js'
import prettier from 'eslint-config-prettier/flat'
import vue from 'eslint-plugin-vue'
import { defineConfig, globalIgnores } from 'eslint/config'
import globals from 'globals'
import tseslint from 'typescript-eslint'
import { importRules } from './imports.js'

const top = resolve(import.meta.dirname, '..')

const NOW = [
  {
    selector: 'NewExpression[callee.name="Date"][arguments.length=0]',
    message: 'Time is an input: take a clock (server/clock.ts) instead of asking the machine.',
  },
  {
    selector: 'CallExpression[callee.object.name="Date"][callee.property.name="now"]',
    message: 'Time is an input: take a clock (server/clock.ts) instead of asking the machine.',
  },
]

const HOOKLESS = [
  {
    selector:
      'CallExpression[callee.property.name=/^(sum|max|min|aggregate|increment|decrement)$/][callee.object.name=/^[A-Z]/]:not([callee.object.name="Math"])',
    message: 'The tenant guard does not see this call: write it as a file in server/queries.',
  },
  {
    selector:
      'CallExpression[callee.property.name="query"]:matches([callee.object.name=/^(sequelize|database|db|connection|pool)$/], [callee.object.property.name=/^(sequelize|database|db|connection|pool)$/])',
    message: 'The tenant guard does not see raw SQL: write it as a file in server/queries.',
  },
]

const WHOLE_SUITE = [
  {
    selector:
      'MemberExpression[property.name=/^(only|skip|skipIf|runIf|todo|fixme)$/]:matches([object.name=/^(it|test|describe|suite)$/], [object.property.name="describe"])',
    message: 'Every test runs, every time: repair the test or take it away.',
  },
  {
    selector: 'CallExpression[callee.property.name="waitForTimeout"]',
    message: 'A test waits for what it expects, not for time to pass.',
  },
]

/** Folders where SQL is written by hand. */
const SQL = ['server/{queries,models,migrations,database}/**/*.ts']

export default defineConfig([
  globalIgnores(['dist/**', 'coverage/**', '.data/**', 'test-results/**']),
  js.configs.recommended,
  tseslint.configs.recommendedTypeChecked,
  vue.configs['flat/recommended'],
  {
    languageOptions: {
      parserOptions: {
        projectService: true,
        extraFileExtensions: ['.vue'],
        tsconfigRootDir: top,
      },
    },
    linterOptions: { reportUnusedDisableDirectives: 'error' },
    rules: {
      eqeqeq: ['error', 'always'],
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_' }],
      '@typescript-eslint/require-await': 'off',
      '@typescript-eslint/no-misused-promises': [
        'error',
        { checksVoidReturn: { arguments: false, attributes: false } },
      ],
      '@typescript-eslint/restrict-template-expressions': [
        'error',
        { allowNumber: true, allowBoolean: true },
      ],
    },
  },
  {
    files: ['**/*.vue'],
    languageOptions: { parserOptions: { parser: tseslint.parser }, globals: globals.browser },
    rules: {
      // TypeScript finds undefined names, with the template's own.
      'no-undef': 'off',
      'vue/block-lang': ['error', { script: { lang: 'ts' } }],
      'vue/component-api-style': ['error', ['script-setup']],
      'vue/no-v-html': 'error',
      // Props are typed; one without a default is undefined, as its type says.
      'vue/require-default-prop': 'off',
    },
  },
  {
    files: ['src/{App,pages/**/*,layouts/**/*}.vue'],
    rules: { 'vue/multi-word-component-names': 'off' },
  },
  {
    files: ['**/*.{js,mjs}'],
    extends: [tseslint.configs.disableTypeChecked],
    languageOptions: { globals: globals.node },
  },
  {
    name: 'pure code of both sides',
    files: ['server/shared/**/*.ts', 'server/contract/**/*.ts'],
    rules: {
      'no-restricted-globals': [
        'error',
        ...['window', 'document', 'navigator', 'localStorage', 'process', 'Buffer', 'fetch'].map(
          (name) => ({ name, message: 'This code runs in Node and in the browser: use neither.' }),
        ),
      ],
    },
  },
  {
    name: 'time and SQL',
    files: ['server/**/*.ts', 'jobs/**/*.ts'],
    ignores: ['server/clock.ts', ...SQL],
    rules: { 'no-restricted-syntax': ['error', ...NOW, ...HOOKLESS] },
  },
  { name: 'time', files: SQL, rules: { 'no-restricted-syntax': ['error', ...NOW] } },
  {
    name: 'tests',
    files: ['tests/**/*.ts'],
    rules: {
      'no-restricted-syntax': ['error', ...WHOLE_SUITE],
      // Answers of supertest and of mounted components are untyped; the tests check them by value.
      '@typescript-eslint/no-unsafe-argument': 'off',
      '@typescript-eslint/no-unsafe-assignment': 'off',
      '@typescript-eslint/no-unsafe-call': 'off',
      '@typescript-eslint/no-unsafe-member-access': 'off',
      '@typescript-eslint/no-unsafe-return': 'off',
      '@typescript-eslint/unbound-method': 'off',
    },
  },
  ...importRules,
  prettier,
])
