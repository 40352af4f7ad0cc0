import { spawn } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import { describe, expect, it, onTestFinished } from 'vitest'
import { livePostmaster } from '../../../../server/postgres/postmaster'
import { testFolder } from '../../../support/folder'

/** A file as PostgreSQL writes it: pid, data folder, start, port, socket folder, address, memory, status. */
function postmasterPid(folder: string, pid: number, status = 'ready   ') {
  const lines = [pid, folder, 1796132064, 54321, '', '127.0.0.1', '  1234567         1', status]
  fs.writeFileSync(path.join(folder, 'postmaster.pid'), `${lines.join('\n')}\n`)
}

/** A process that the kernel knows by the name `postgres` and that works in this folder. */
async function processNamedPostgres(folder: string): Promise<number> {
  const program = path.join(folder, 'postgres')
  fs.copyFileSync('/bin/sleep', program)
  fs.chmodSync(program, 0o755)
  const child = spawn(program, ['60'], { cwd: folder, stdio: 'ignore' })
  await new Promise((done) => child.once('spawn', done))
  onTestFinished(() => void child.kill('SIGKILL'))
  return child.pid!
}

describe('whether a PostgreSQL runs on a data folder', () => {
  it('is no without a note of one', () => {
    expect(livePostmaster(testFolder())).toBeUndefined()
  })

  it('is no when the noted process is gone; the server clears that note by itself', () => {
    const folder = testFolder()
    postmasterPid(folder, 4_194_305)
    expect(livePostmaster(folder)).toBeUndefined()
  })

  it('is no when the number now belongs to another program, and the note that would mislead a server is removed', () => {
    const folder = testFolder()
    postmasterPid(folder, process.pid)
    expect(livePostmaster(folder)).toBeUndefined()
    expect(fs.existsSync(path.join(folder, 'postmaster.pid'))).toBe(false)
  })

  it('is no when a PostgreSQL has the number, but works in another folder', async () => {
    const [folder, other] = [testFolder(), testFolder()]
    postmasterPid(folder, await processNamedPostgres(other))
    expect(livePostmaster(folder)).toBeUndefined()
  })

  it('is yes, with its port, and whether it is ready', async () => {
    const folder = testFolder()
    const pid = await processNamedPostgres(folder)
    postmasterPid(folder, pid)
    expect(livePostmaster(folder)).toEqual({ pid, port: 54321, ready: true })
    postmasterPid(folder, pid, 'starting')
    expect(livePostmaster(folder)).toEqual({ pid, port: 54321, ready: false })
  })
})
