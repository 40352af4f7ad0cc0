import vue from '@vitejs/plugin-vue'
import { defineConfig } from 'vitest/config'

const root = new URL('..', import.meta.url).pathname

export default defineConfig({
  root,
  plugins: [vue()],
  test: {
    projects: [
      {
        extends: true,
        test: { name: 'unit', include: ['tests/unit/**/*.test.ts'], exclude: ['tests/unit/src/**'] },
      },
      {
        extends: true,
        test: { name: 'client', include: ['tests/unit/src/**/*.test.ts'], environment: 'happy-dom' },
      },
      { extends: true, test: { name: 'reference', include: ['tests/reference/**/*.test.ts'] } },
      {
        extends: true,
        test: {
          name: 'api',
          include: ['tests/api/**/*.test.ts'],
          globalSetup: ['tests/support/globalDatabase.ts'],
          env: { NODE_ENV: 'test' },
          maxWorkers: 2,
          testTimeout: 20_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'sockets',
          include: ['tests/sockets/**/*.test.ts'],
          globalSetup: ['tests/support/globalDatabase.ts'],
          env: { NODE_ENV: 'test' },
          maxWorkers: 2,
          testTimeout: 30_000,
          hookTimeout: 60_000,
        },
      },
    ],
  },
})
