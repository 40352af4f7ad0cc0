import { spawn } from 'node:child_process'
import { createHash } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import { fileURLToPath } from 'node:url'

export const root = fileURLToPath(new URL('../..', import.meta.url))
export const clientDir = path.join(root, 'dist')
const stamp = path.join(clientDir, '.built-from')

/** What the built client is made from. */
const sources = ['src', 'shared', 'public', 'index.html', 'vite.config.ts', 'package-lock.json']

/** Builds the client when what it is made from changed since the last build. */
export async function buildClientIfStale(signal?: AbortSignal) {
  const hash = sourceHash(root, sources)
  if (fs.existsSync(stamp) && fs.readFileSync(stamp, 'utf8') === hash) return
  await build(signal)
  fs.writeFileSync(stamp, hash)
}

function build(signal?: AbortSignal): Promise<void> {
  const vite = path.join(root, 'node_modules/vite/bin/vite.js')
  return new Promise((done, failed) => {
    const child = spawn(process.execPath, [vite, 'build', '--logLevel', 'error'], {
      cwd: root,
      stdio: ['ignore', 'ignore', 'inherit'],
      signal,
    })
    child.once('error', failed)
    child.once('exit', (code) =>
      code === 0 ? done() : failed(new Error('The client could not be built; the reason stands above.')),
    )
  })
}

/** Hex SHA-256 over names and contents of these files and folders; what does not exist counts as nothing. */
export function sourceHash(folder: string, names: readonly string[]): string {
  const hash = createHash('sha256')
  for (const name of names) addTo(hash, folder, name)
  return hash.digest('hex')
}

function addTo(hash: ReturnType<typeof createHash>, folder: string, name: string) {
  const full = path.join(folder, name)
  const found = fs.statSync(full, { throwIfNoEntry: false })
  if (!found) return
  if (!found.isDirectory()) {
    hash.update(`${name}\0${found.size}\0`).update(fs.readFileSync(full))
    return
  }
  for (const entry of fs.readdirSync(full).sort()) addTo(hash, folder, path.join(name, entry))
}
