import { fileURLToPath } from 'node:url'
import vue from '@vitejs/plugin-vue'
import { defineConfig } from 'vitest/config'

const root = fileURLToPath(new URL('..', import.meta.url))

/** Tests against a real PostgreSQL: a fresh copy of a migrated database for every file. */
const onDatabase = {
  globalSetup: ['tests/support/globalDatabase.ts'],
  env: { NODE_ENV: 'test' },
  testTimeout: 30_000,
  hookTimeout: 60_000,
}

export default defineConfig({
  root,
  plugins: [vue()],
  test: {
    maxWorkers: 2,
    setupFiles: ['tests/support/seeded.ts'],
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
      { extends: true, test: { name: 'api', include: ['tests/api/**/*.test.ts'], ...onDatabase } },
      { extends: true, test: { name: 'sockets', include: ['tests/sockets/**/*.test.ts'], ...onDatabase } },
      {
        // What is killed, taken or cut off on purpose: real processes, one file after the other.
        extends: true,
        test: {
          name: 'faults',
          include: ['tests/faults/**/*.test.ts'],
          maxWorkers: 1,
          sequence: { groupOrder: 1 },
          testTimeout: 60_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
})
