import { defineConfigWithVueTs, vueTsConfigs } from '@vue/eslint-config-typescript'
import prettier from 'eslint-config-prettier/flat'
import pluginVue from 'eslint-plugin-vue'
import globals from 'globals'

const room = (files, forbidden, why) => ({
  files,
  rules: {
    '@typescript-eslint/no-restricted-imports': [
      'error',
      { patterns: forbidden.map((regex) => ({ regex, message: why })) },
    ],
  },
})

export default defineConfigWithVueTs(
  { ignores: ['dist/**', 'node_modules/**', '.data/**', '.cache/**', 'drizzle/**', 'public/**'] },
  pluginVue.configs['flat/recommended'],
  vueTsConfigs.recommended,
  prettier,
  {
    rules: {
      '@typescript-eslint/no-explicit-any': 'error',
      '@typescript-eslint/no-unused-vars': ['error', { argsIgnorePattern: '^_', varsIgnorePattern: '^_' }],
      'vue/no-v-html': 'error',
      'vue/multi-word-component-names': 'error',
      'vue/require-default-prop': 'off',
      'vue/block-order': ['error', { order: ['script', 'template', 'style'] }],
      'no-console': 'off',
    },
  },
  {
    // Every word that a person reads comes from the catalogue.
    files: ['src/**/*.vue'],
    rules: {
      'vue/no-bare-strings-in-template': [
        'error',
        { allowlist: ['·', '×', '/', ':', '.', ',', '(', ')', '–', '-', '+', '%', '…', 'Notchwise'] },
      ],
    },
  },
  { files: ['**/*.mjs', '**/*.js'], languageOptions: { globals: globals.node } },
  // src and server meet in shared and nowhere else.
  room(
    ['src/**/*.{ts,vue}'],
    ['(^|/)server(/|$)', '^(express|pg|drizzle-orm)', '^node:'],
    'src knows shared, not the server',
  ),
  room(
    ['server/**/*.ts'],
    ['(^|/)src(/|$)', '^(vue|pinia|primevue)'],
    'the server knows shared, not the client',
  ),
  room(
    ['shared/**/*.ts'],
    ['^(?!#shared/|zod($|/)|\\.\\.?/)', '^(\\.\\./)+(server|src|tests)/'],
    'shared imports zod and itself only',
  ),
  {
    // Pure: the same answer everywhere and always.
    files: ['shared/**/*.ts'],
    rules: {
      'no-restricted-globals': [
        'error',
        'process',
        'window',
        'document',
        'fetch',
        'setTimeout',
        'setInterval',
        'crypto',
      ],
      'no-restricted-properties': [
        'error',
        { object: 'Date', property: 'now', message: 'the clock is an argument' },
        { object: 'Math', property: 'random', message: 'chance is an argument' },
      ],
      'no-restricted-syntax': [
        'error',
        {
          selector: "NewExpression[callee.name='Date'][arguments.length=0]",
          message: 'the clock is an argument',
        },
      ],
    },
  },
  {
    files: ['server/**/*.ts'],
    ignores: ['server/config.ts', 'server/postgres/**', 'server/bin/**'],
    rules: {
      'no-restricted-properties': [
        'error',
        { object: 'process', property: 'env', message: 'server/config.ts reads it' },
      ],
    },
  },
)
