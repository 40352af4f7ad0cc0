import { spawn, type ChildProcess } from 'node:child_process'
import fs from 'node:fs'
import net from 'node:net'
import path from 'node:path'
import { fileURLToPath } from 'node:url'
import { setTimeout as pause } from 'node:timers/promises'

const root = fileURLToPath(new URL('../..', import.meta.url))

export interface Start {
  process: ChildProcess
  /** All that it printed. */
  output: () => string
  /** Its exit code; null after a signal. */
  exit: Promise<number | null>
  /** The address that it printed; throws its output when it ended before. */
  url: () => Promise<string>
}

/** The start command as a person types it, over a data folder and a port of one's own. */
export function start(dataDir: string, port: number, args: string[] = []): Start {
  const child = spawn(process.execPath, ['server/bin/bootstrap.mjs', 'server/bin/start.ts', ...args], {
    cwd: root,
    env: { PATH: process.env.PATH, NOTCHWISE_DATA: dataDir, PORT: String(port) },
    stdio: ['ignore', 'pipe', 'pipe'],
  })
  let printed = ''
  for (const stream of [child.stdout, child.stderr])
    stream.on('data', (text: Buffer) => (printed += text.toString()))
  let over = false
  const exit = new Promise<number | null>((done) =>
    child.once('close', (code) => {
      over = true
      done(code)
    }),
  )
  return {
    process: child,
    output: () => printed,
    exit,
    url: async () => {
      await until('its address', () => over || printed.includes('Notchwise: '))
      const found = /Notchwise: (http:\/\/\S+)/.exec(printed)?.[1]
      if (!found) throw new Error(`The start ended before it served:\n${printed}`)
      return found
    },
  }
}

/** Waits until something holds, a minute at most. */
export async function until(what: string, holds: () => boolean | Promise<boolean>) {
  const deadline = Date.now() + 60_000
  while (!(await holds())) {
    if (Date.now() > deadline) throw new Error(`Waited a minute for ${what}.`)
    await pause(50)
  }
}

/** The process that serves on this data folder, by the start's own note. */
export function servingProcess(dataDir: string): number {
  const note = JSON.parse(fs.readFileSync(path.join(dataDir, 'running.json'), 'utf8')) as { pid: number }
  return note.pid
}

export function freePort(): Promise<number> {
  return new Promise((found, failed) => {
    const server = net.createServer().once('error', failed)
    server.listen(0, '127.0.0.1', () => {
      const { port } = server.address() as net.AddressInfo
      server.close(() => found(port))
    })
  })
}
