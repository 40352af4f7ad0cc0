import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { livePostmaster } from '../../server/postgres/postmaster'
import { freePort, servingProcess, start, until, type Start } from '../support/start'

let dataDir: string
let port: number
let running: Start

beforeAll(async () => {
  dataDir = fs.mkdtempSync(path.join(os.tmpdir(), 'notchwise-start-'))
  port = await freePort()
})
afterAll(async () => {
  running.process.kill('SIGTERM')
  await running.exit
  fs.rmSync(dataDir, { recursive: true, force: true })
})

const postmaster = () => livePostmaster(path.join(dataDir, 'postgres'))

/** The status of an answer; 0 for no answer. */
const status = (url: string) =>
  fetch(url).then(
    (response) => response.status,
    () => 0,
  )

async function startAgain(args: string[] = []): Promise<string> {
  running = start(dataDir, port, args)
  return running.url()
}

async function signIn(url: string, email: string, password: string): Promise<number> {
  const response = await fetch(`${url}/api/session`, {
    method: 'POST',
    headers: { 'content-type': 'application/json', origin: url, 'x-notchwise': '1' },
    body: JSON.stringify({ email, password }),
  })
  return response.status
}

/** The first sign-in that the start printed. */
function printedSignIn(): [email: string, password: string] {
  const [, email, password] = /sign in as (\S+) (\S+)/.exec(running.output()) ?? []
  return [email!, password!]
}

describe('one start command', () => {
  it('leads from an empty folder to a demo shop that its printed sign-in opens', async () => {
    const url = await startAgain()
    expect(url).toBe(`http://127.0.0.1:${port}`)
    expect(await status(`${url}/readyz`)).toBe(200)
    expect(await (await fetch(url)).text()).toContain('<div id="app">')
    expect(await signIn(url, ...printedSignIn())).toBe(201)
  })

  it('says, while one runs, that it runs and where', async () => {
    const second = start(dataDir, await freePort())
    expect(await second.exit).toBe(1)
    expect(second.output()).toContain(`Notchwise already runs at http://127.0.0.1:${port}`)
    expect(await status(`http://127.0.0.1:${port}/readyz`)).toBe(200)
  })

  it('names a port that another program holds', async () => {
    const elsewhere = fs.mkdtempSync(path.join(os.tmpdir(), 'notchwise-start-'))
    const second = start(elsewhere, port)
    expect(await second.exit).toBe(1)
    expect(second.output()).toContain(`Port ${port} on 127.0.0.1 is taken`)
    expect(fs.readdirSync(elsewhere)).toEqual([])
    fs.rmSync(elsewhere, { recursive: true })
  })

  it('brings its PostgreSQL back after kill -9, and the server lives on', async () => {
    const [server, before] = [servingProcess(dataDir), postmaster()!]
    process.kill(before.pid, 'SIGKILL')
    await until('another PostgreSQL', () => postmaster() !== undefined && postmaster()!.pid !== before.pid)
    await until(
      'the server to be ready',
      async () => (await status(`http://127.0.0.1:${port}/readyz`)) === 200,
    )
    expect(servingProcess(dataDir)).toBe(server)
    expect(await signIn(`http://127.0.0.1:${port}`, ...printedSignIn())).toBe(201)
  })

  it('stops all that it started when it is told to, and nothing stays behind', async () => {
    running.process.kill('SIGTERM')
    expect(await running.exit).toBe(0)
    expect(postmaster()).toBeUndefined()
    expect(await status(`http://127.0.0.1:${port}/livez`)).toBe(0)
    expect(fs.existsSync(path.join(dataDir, 'running.json'))).toBe(false)
  })

  it('recovers from kill -9 of the server, whose PostgreSQL ends by itself', async () => {
    await startAgain()
    process.kill(servingProcess(dataDir), 'SIGKILL')
    await until('the end of PostgreSQL', () => postmaster() === undefined)
    await running.exit
    const url = await startAgain()
    expect(await signIn(url, ...printedSignIn())).toBe(201)
  })

  it('leaves no server behind when the command itself is killed with -9', async () => {
    running.process.kill('SIGKILL')
    await until('the end of the server', async () => (await status(`http://127.0.0.1:${port}/livez`)) === 0)
    await until('the end of PostgreSQL', () => postmaster() === undefined)
  })

  it('starts a shop of one’s own empty, and asks for the code that it printed', async () => {
    const url = await startAgain(['--real'])
    expect(running.output()).toMatch(/type this code once: [0-9A-F]{5}(-[0-9A-F]{5}){3}/)
    expect(running.output()).not.toContain('sign in as')
    expect(await signIn(url, 'manager@tarnside.example', 'tarnside-manager')).toBe(401)
    running.process.kill('SIGTERM')
    expect(await running.exit).toBe(0)
  })

  it('refuses a PostgreSQL that would forget what it confirmed', async () => {
    fs.appendFileSync(path.join(dataDir, 'postgres', 'postgresql.conf'), '\nfsync = off\n')
    running = start(dataDir, port)
    expect(await running.exit).toBe(1)
    expect(running.output()).toContain('PostgreSQL runs with fsync off')
    await until('the end of PostgreSQL', () => postmaster() === undefined)
  })
})
