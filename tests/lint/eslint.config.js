import { defineConfigWithVueTs, vueTsConfigs } from '@vue/eslint-config-typescript'
import prettier from 'eslint-config-prettier/flat'
import pluginVue from 'eslint-plugin-vue'
import globals from 'globals'
import { purity, room, without } from './rooms.js'

export default defineConfigWithVueTs(
  {
    ignores: ['dist/**', 'node_modules/**', '.data/**', '.cache/**', 'drizzle/**', 'public/**'],
  },
  // A rule is changed here, for everybody, or obeyed.
  { linterOptions: { noInlineConfig: true } },
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
    },
  },
  { files: ['**/*.mjs', '**/*.js'], languageOptions: { globals: globals.node } },
  {
    files: ['src/**/*.{ts,vue}'],
    rules: without(
      ['document', 'write'],
      [null, 'innerHTML'],
      [null, 'outerHTML'],
      [null, 'insertAdjacentHTML'],
    ),
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

  // src and server meet in shared and nowhere else.
  room(['src/**/*.{ts,vue}'], clientRoom()),
  room(
    ['src/**/*.{ts,vue}'],
    { ...clientRoom(), '^primevue(/|$)': 'views use the Base components; those wrap the library' },
    ['src/components/base/**', 'src/primevue.ts', 'src/theme/**', 'src/main.ts'],
  ),
  room(['server/**/*.ts'], serverRoom()),
  // routes parse, call one service and answer; services never see HTTP; queries and schema know neither.
  room(['server/routes/**/*.ts'], {
    ...serverRoom(),
    '^(drizzle-orm|pg)(/|$)|/db/(schema|client)(/|$)': 'routes call services and reads of db/queries',
  }),
  room(['server/services/**/*.ts'], {
    ...serverRoom(),
    '^(express|socket\\.io)(/|$)|/(routes|middleware|sockets)/': 'services know nothing of HTTP',
  }),
  room(
    ['server/db/**/*.ts'],
    {
      ...serverRoom(),
      '^(express|socket\\.io)(/|$)|/(routes|middleware|sockets)/': 'the database knows nothing of HTTP',
      '/services/': 'services know the database, not the other way round',
    },
    ['server/db/seed/**'],
  ),
  room(['shared/**/*.ts'], {
    '^(?!#shared/|zod($|/)|\\.\\.?/)': 'shared imports zod and itself only',
    '^(\\.\\./)+(server|src|tests)/': 'shared imports zod and itself only',
  }),
  purity(['shared/**/*.ts']),
  {
    files: ['server/**/*.ts'],
    ignores: ['server/config.ts', 'server/postgres/**'],
    rules: without(['process', 'env', 'server/config.ts reads it']),
  },
  {
    files: ['tests/**/*.ts'],
    rules: {
      'no-restricted-syntax': [
        'error',
        {
          selector:
            'MemberExpression[object.name=/^(it|test|describe)$/][property.name=/^(skip|only|todo|fixme)$/]',
          message: 'every test runs, or is not there',
        },
      ],
    },
  },
)

function clientRoom() {
  return {
    '(^|/)server(/|$)': 'src knows shared, not the server',
    '(^|/)tests/': 'src knows shared and itself',
    '^(express|pg|drizzle-orm|socket\\.io|node:.*|fs|path|os|crypto|http|url|child_process)(/|$)':
      'a browser runs this',
  }
}

function serverRoom() {
  return {
    '(^|/)src(/|$)': 'the server knows shared, not the client',
    '(^|/)tests/': 'the server knows shared and itself',
    '^(vue|vue-router|vue-i18n|pinia|primevue|@primeuix|@pinia)(/|$)': 'this is the server',
  }
}
