import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import net from 'node:net'
import path from 'node:path'

interface Running {
  pid: number
  url: string
}

const fileIn = (dataDir: string) => path.join(dataDir, 'running.json')

/** The start that runs on this data folder now; one that was killed is forgotten. */
export function runningStart(dataDir: string): Running | null {
  try {
    const running = JSON.parse(fs.readFileSync(fileIn(dataDir), 'utf8')) as Running
    const command = fs.readFileSync(`/proc/${running.pid}/cmdline`, 'utf8')
    return running.pid !== process.pid && command.includes('start.ts') ? running : null
  } catch {
    return null
  }
}

export function noteRunning(dataDir: string, url: string) {
  fs.writeFileSync(fileIn(dataDir), JSON.stringify({ pid: process.pid, url }), { mode: 0o600 })
}

export function forgetRunning(dataDir: string) {
  fs.rmSync(fileIn(dataDir), { force: true })
}

/** Whether somebody else listens there. */
export function portIsTaken(host: string, port: number): Promise<boolean> {
  return new Promise((answer) => {
    const probe = net.createServer()
    probe.once('error', (error: NodeJS.ErrnoException) => answer(error.code === 'EADDRINUSE'))
    probe.listen(port, host, () => probe.close(() => answer(false)))
  })
}

/** The secret that signs sessions: made once, kept beside the data, readable by its owner only. */
export function sessionSecret(dataDir: string): string {
  const file = path.join(dataDir, 'session.secret')
  if (!fs.existsSync(file))
    fs.writeFileSync(file, randomBytes(32).toString('base64url'), { mode: 0o600, flag: 'wx' })
  const secret = fs.readFileSync(file, 'utf8').trim()
  if (secret.length < 32)
    throw new Error(`${file} holds a weak secret. Remove the file: a strong one is made at the next start.`)
  return secret
}
