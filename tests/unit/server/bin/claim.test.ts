import fs from 'node:fs'
import path from 'node:path'
import { describe, expect, it } from 'vitest'
import { claimDataDir, processBegan } from '../../../../server/bin/claim'
import { testFolder } from '../../../support/folder'

const noted = (folder: string, holder: object) =>
  fs.writeFileSync(path.join(folder, 'running.json'), JSON.stringify(holder))

describe('the claim of a start on its data folder', () => {
  it('is held until it is given back, and leaves nothing behind', () => {
    const folder = testFolder()
    const claim = claimDataDir(folder)
    expect(() => claimDataDir(folder)).toThrow(`already being started by process ${process.pid}`)
    claim.serves('http://127.0.0.1:4310')
    expect(() => claimDataDir(folder)).toThrow('Notchwise already runs at http://127.0.0.1:4310')
    claim.release()
    expect(fs.readdirSync(folder)).toEqual([])
    claimDataDir(folder).release()
  })

  it('is forgotten when its process was killed', () => {
    const folder = testFolder()
    // Above the highest number that Linux gives a process.
    noted(folder, { pid: 4_194_305, began: '1', url: 'http://127.0.0.1:4310' })
    expect(() => claimDataDir(folder)).not.toThrow()
  })

  it('is forgotten when another program got the number of its process', () => {
    const folder = testFolder()
    noted(folder, { pid: process.pid, began: '1', url: 'http://127.0.0.1:4310' })
    expect(() => claimDataDir(folder)).not.toThrow()
  })

  it('is forgotten when a power cut left half a note', () => {
    const folder = testFolder()
    fs.writeFileSync(path.join(folder, 'running.json'), '{"pid": 1')
    expect(() => claimDataDir(folder)).not.toThrow()
  })

  it('does not take away the claim of a later start', () => {
    const folder = testFolder()
    const claim = claimDataDir(folder)
    const later = { pid: 1, began: processBegan(1), url: null }
    noted(folder, later)
    claim.release()
    expect(JSON.parse(fs.readFileSync(path.join(folder, 'running.json'), 'utf8'))).toEqual(later)
  })
})
