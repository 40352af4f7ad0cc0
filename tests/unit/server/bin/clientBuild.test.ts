import fs from 'node:fs'
import path from 'node:path'
import { describe, expect, it } from 'vitest'
import { sourceHash } from '../../../../server/bin/clientBuild'
import { testFolder } from '../../../support/folder'

const names = ['src', 'index.html', 'missing']

function sources() {
  const folder = testFolder()
  fs.mkdirSync(path.join(folder, 'src/views'), { recursive: true })
  fs.writeFileSync(path.join(folder, 'src/main.ts'), 'main')
  fs.writeFileSync(path.join(folder, 'src/views/A.vue'), 'a')
  fs.writeFileSync(path.join(folder, 'index.html'), 'page')
  fs.writeFileSync(path.join(folder, 'README.md'), 'words')
  return folder
}

describe('what a built client was made from', () => {
  it('is told by the same hash wherever the checkout lies', () => {
    expect(sourceHash(sources(), names)).toBe(sourceHash(sources(), names))
  })

  it.each<[string, (folder: string) => void]>([
    ['a changed file', (folder) => fs.writeFileSync(path.join(folder, 'src/views/A.vue'), 'b')],
    ['a new file', (folder) => fs.writeFileSync(path.join(folder, 'src/B.ts'), '')],
    [
      'a renamed file',
      (folder) => fs.renameSync(path.join(folder, 'src/main.ts'), path.join(folder, 'src/m.ts')),
    ],
    ['a file that went', (folder) => fs.rmSync(path.join(folder, 'index.html'))],
  ])('is another after %s', (_what, change) => {
    const folder = sources()
    const before = sourceHash(folder, names)
    change(folder)
    expect(sourceHash(folder, names)).not.toBe(before)
  })

  it('does not count what the client is not made from', () => {
    const folder = sources()
    const before = sourceHash(folder, names)
    fs.writeFileSync(path.join(folder, 'README.md'), 'other words')
    expect(sourceHash(folder, names)).toBe(before)
  })
})
