import fs from 'node:fs'
import path from 'node:path'

export interface Postmaster {
  pid: number
  port: number
  ready: boolean
}

/**
 * The server that runs on this data folder, by its own postmaster.pid. A file left by a killed server, whose number
 * now belongs to another program, is removed: the next server would believe it.
 */
export function livePostmaster(dataDir: string): Postmaster | undefined {
  const file = path.join(dataDir, 'postmaster.pid')
  const lines = linesOf(file)
  if (!lines) return undefined
  const pid = Number(lines[0])
  const command = commandOf(pid)
  if (command === undefined) return undefined
  if (command === 'postgres' && worksIn(pid, dataDir)) {
    return { pid, port: Number(lines[3]), ready: lines[7]?.trim() === 'ready' }
  }
  fs.rmSync(file, { force: true })
  return undefined
}

function linesOf(file: string): string[] | undefined {
  try {
    return fs.readFileSync(file, 'utf8').split('\n')
  } catch {
    return undefined
  }
}

/** The program's name; empty for a zombie, undefined for no process. */
function commandOf(pid: number): string | undefined {
  try {
    const stat = fs.readFileSync(`/proc/${pid}/stat`, 'utf8')
    const end = stat.lastIndexOf(')')
    return stat.charAt(end + 2) === 'Z' ? '' : stat.slice(stat.indexOf('(') + 1, end)
  } catch {
    return undefined
  }
}

/** Whether the process works in this folder; where we may not look, its name is believed. */
function worksIn(pid: number, dataDir: string): boolean {
  try {
    return fs.readlinkSync(`/proc/${pid}/cwd`) === fs.realpathSync(dataDir)
  } catch {
    return true
  }
}
