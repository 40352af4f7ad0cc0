import fs from 'node:fs'
import { describe, expect, it } from 'vitest'

interface Package {
  version?: string
  license?: string
  optional?: boolean
}

const root = new URL('../../', import.meta.url)
const installed = (
  JSON.parse(fs.readFileSync(new URL('node_modules/.package-lock.json', root), 'utf8')) as {
    packages: Record<string, Package>
  }
).packages

/** Permissive licences that need no more than their text. */
const allowed = new Set([
  ...[
    'MIT',
    'MIT-0',
    'ISC',
    'BSD-2-Clause',
    'BSD-3-Clause',
    'Apache-2.0',
    'OFL-1.1',
    'MPL-2.0',
    'Zlib',
    'CC0-1.0',
  ],
  ...['0BSD', 'BlueOak-1.0.0', 'Unlicense', 'Python-2.0', 'CC-BY-4.0'],
])

/** Packages whose field names none, and why they are fine. */
const exceptions: Record<string, string> = {
  pause: 'no field in package.json; the text in its readme is MIT',
  'passport-local': 'an older form of the field; the text of its LICENSE file is MIT',
  'passport-strategy': 'an older form of the field; the text of its LICENSE file is MIT',
  'xmlhttprequest-ssl': 'an older form of the field; the text of its LICENSE file is MIT',
}

/** Whether an SPDX expression leaves us an allowed choice. */
function isAllowed(expression: string): boolean {
  const words = expression.replaceAll(/[()]/g, '').split(/\s+OR\s+/)
  return words.some((choice) => choice.split(/\s+AND\s+/).every((one) => allowed.has(one)))
}

const nameOf = (path: string) => path.replace(/^.*node_modules\//, '')

function atLeast(version: string, least: string): boolean {
  const [a, b] = [version, least].map((text) => text.split('-')[0]!.split('.').map(Number)) as [
    number[],
    number[],
  ]
  for (let i = 0; i < 3; i += 1) if (a[i] !== b[i]) return (a[i] ?? 0) > (b[i] ?? 0)
  return true
}

describe('the packages that are shipped', () => {
  it('all have a licence that we may ship under', () => {
    const others = Object.entries(installed)
      .filter(([path, { license }]) => !isAllowed(license ?? '') && !(nameOf(path) in exceptions))
      .map(([path, { license }]) => `${nameOf(path)}: ${license ?? 'none'}`)
    expect(others).toEqual([])
  })

  it('are at least the versions in which known holes were closed', () => {
    const least = { 'drizzle-orm': '0.45.2', 'socket.io-parser': '4.2.7', multer: '2.3.0' }
    for (const [name, version] of Object.entries(least)) {
      const found = Object.entries(installed).filter(([path]) => nameOf(path) === name)
      for (const [path, { version: is = '0' }] of found)
        expect(atLeast(is, version), `${path} ${is}`).toBe(true)
    }
  })
})
