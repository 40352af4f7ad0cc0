import { fileURLToPath } from 'node:url'
import { ESLint } from 'eslint'
import { describe, expect, it, vi } from 'vitest'

// The first file that is linted waits for the whole of ESLint.
vi.setConfig({ testTimeout: 30_000 })

const root = fileURLToPath(new URL('../../..', import.meta.url))
const eslint = new ESLint({ cwd: root, overrideConfigFile: 'tests/lint/eslint.config.js' })

/** The rules that this text breaks when it stands in that file. */
async function broken(filePath: string, text: string): Promise<string[]> {
  const [result] = await eslint.lintText(text, { filePath: `${root}${filePath}` })
  return result!.messages.map(({ ruleId }) => ruleId ?? 'warning')
}

const imports = '@typescript-eslint/no-restricted-imports'
const uses = (from: string) => `import x from '${from}'\nexport default x\n`

describe('no arrow but src to shared and server to shared', () => {
  it.each([
    ['src/views/AView.ts', '../../server/app'],
    ['src/views/AView.ts', 'node:fs'],
    ['src/views/AView.ts', 'crypto'],
    ['src/views/AView.ts', 'express'],
    ['src/views/AView.ts', 'primevue/button'],
    ['src/components/base/BaseX.ts', '../../../server/config'],
    ['server/services/a.ts', '../../src/socket'],
    ['server/services/a.ts', 'vue'],
    ['server/services/a.ts', 'express'],
    ['server/services/a.ts', '../routes/route'],
    ['server/routes/a.ts', 'drizzle-orm'],
    ['server/routes/a.ts', '../db/schema/schema'],
    ['server/db/queries/a.ts', '../../routes/route'],
    ['server/db/queries/a.ts', '../../services/shops'],
    ['server/app.ts', '../tests/support/app'],
    ['shared/units/a.ts', 'node:fs'],
    ['shared/units/a.ts', 'vue'],
    ['shared/units/a.ts', '../../server/config'],
    ['shared/units/a.ts', '../../src/socket'],
  ])('%s may not import %s', async (file, from) => {
    expect(await broken(file, uses(from))).toEqual([imports])
  })

  it.each([
    ['src/views/AView.ts', '#shared/errors'],
    ['src/components/base/BaseX.ts', 'primevue/button'],
    ['server/services/a.ts', '#shared/errors'],
    ['server/services/a.ts', 'drizzle-orm'],
    ['server/routes/a.ts', '../services/board'],
    ['server/db/seed/a.ts', '../../services/defaultTexts'],
    ['shared/units/a.ts', 'zod'],
    ['shared/units/a.ts', './exact'],
  ])('%s may import %s', async (file, from) => {
    expect(await broken(file, uses(from))).toEqual([])
  })

  it('is not gone around by a lazy import', async () => {
    expect(await broken('src/views/AView.ts', "export const x = () => import('../../server/app')\n")).toEqual(
      ['no-restricted-syntax'],
    )
    expect(await broken('shared/units/a.ts', "export const x = () => import('./exact')\n")).toEqual([
      'no-restricted-syntax',
    ])
  })
})

describe('shared is pure', () => {
  it.each([
    ['Date.now()', 'no-restricted-properties'],
    ['new Date()', 'no-restricted-syntax'],
    ['Date()', 'no-restricted-syntax'],
    ['Math.random()', 'no-restricted-properties'],
    ['process.pid', 'no-restricted-globals'],
    ['window.name', 'no-restricted-globals'],
    ['globalThis.name', 'no-restricted-globals'],
  ])('%s breaks %s', async (expression, rule) => {
    expect(await broken('shared/units/a.ts', `export const x = ${expression}\n`)).toEqual([rule])
  })

  it('may make a date of what it is given', async () => {
    expect(await broken('shared/units/a.ts', 'export const x = (at: number) => new Date(at)\n')).toEqual([])
  })
})

describe('what no file may do', () => {
  it('shows no HTML that came as text', async () => {
    const view =
      '<script setup lang="ts">\nconst a = 1\n</script>\n\n<template>\n  <p v-html="a" />\n</template>\n'
    expect(await broken('src/views/AnyView.vue', view)).toEqual(['vue/no-v-html'])
    expect(await broken('src/views/a.ts', "document.body.innerHTML = 'a'\n")).toEqual([
      'no-restricted-properties',
    ])
  })

  it('writes no word into a view that the catalogue does not hold', async () => {
    expect(await broken('src/views/AnyView.vue', '<template>\n  <p>Ready</p>\n</template>\n')).toEqual([
      'vue/no-bare-strings-in-template',
    ])
  })

  it('reads no environment beside the configuration', async () => {
    expect(await broken('server/services/a.ts', 'export const x = process.env.X\n')).toEqual([
      'no-restricted-properties',
    ])
  })

  it('switches no rule off for itself, and no test', async () => {
    const off = '// eslint-disable-next-line\nexport const x: any = 1\n'
    expect(await broken('server/services/a.ts', off)).toContain('@typescript-eslint/no-explicit-any')
    const skipped = "import { it } from 'vitest'\nit.skip('a', () => undefined)\n"
    expect(await broken('tests/unit/a.test.ts', skipped)).toEqual(['no-restricted-syntax'])
  })
})
