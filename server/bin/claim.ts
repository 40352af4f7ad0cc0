import fs from 'node:fs'
import path from 'node:path'

interface Holder {
  pid: number
  /** When the process began, in the kernel's ticks: tells it from a later one with the same number. */
  began: string
  /** Null while it is still starting. */
  url: string | null
}

export interface Claim {
  /** Notes where this start now serves. */
  serves: (url: string) => void
  release: () => void
}

/**
 * Takes a data folder for this start. While another start runs on it, throws a sentence that says so and where; a
 * start that was killed is forgotten.
 */
export function claimDataDir(dataDir: string): Claim {
  const file = path.join(dataDir, 'running.json')
  const own: Holder = { pid: process.pid, began: processBegan(process.pid) ?? '', url: null }
  const note = `${file}.${process.pid}`
  fs.writeFileSync(note, JSON.stringify(own), { mode: 0o600 })
  try {
    while (!linked(note, file)) {
      const other = holderOf(file)
      if (other && processBegan(other.pid) === other.began) throw new Error(refusal(other))
      fs.rmSync(file, { force: true })
    }
  } finally {
    fs.rmSync(note, { force: true })
  }
  return {
    serves: (url) => {
      fs.writeFileSync(note, JSON.stringify({ ...own, url }), { mode: 0o600 })
      fs.renameSync(note, file)
    },
    release: () => {
      if (holderOf(file)?.pid === process.pid) fs.rmSync(file, { force: true })
    },
  }
}

function refusal({ pid, url }: Holder): string {
  return url
    ? `Notchwise already runs at ${url} (process ${pid}).`
    : `Notchwise is already being started by process ${pid}.`
}

/** Linking fails when the name is there: of two starts that meet, one gets it. */
function linked(note: string, file: string): boolean {
  try {
    fs.linkSync(note, file)
    return true
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'EEXIST') return false
    throw error
  }
}

function holderOf(file: string): Holder | null {
  try {
    return JSON.parse(fs.readFileSync(file, 'utf8')) as Holder
  } catch {
    return null
  }
}

/** Start time of a living process in ticks since boot; null when there is none (a zombie is none). */
export function processBegan(pid: number): string | null {
  try {
    const stat = fs.readFileSync(`/proc/${pid}/stat`, 'utf8')
    // The name in brackets may hold spaces; after it come the state and, twenty words on, the start time.
    const words = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
    return words[0] === 'Z' ? null : (words[19] ?? null)
  } catch {
    return null
  }
}
