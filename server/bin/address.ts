import net from 'node:net'
import os from 'node:os'
import { setTimeout as pause } from 'node:timers/promises'

/** Why this process cannot serve there, in words that say what to do; null when it can. */
export async function addressProblem(host: string, port: number): Promise<string | null> {
  const code = await listenError(host, port)
  return code === null ? null : wordsFor(code, host, port)
}

/** The words for what `listen` refused. */
export function wordsFor(code: string, host: string, port: number): string {
  if (code === 'EADDRINUSE')
    return `Port ${port} on ${host} is taken by another program. PORT=${port + 1} npm start serves on the next one.`
  if (code === 'EACCES')
    return `Only root may serve on port ${port}. PORT=4310 npm start serves on a port that everybody may use.`
  if (code === 'EADDRNOTAVAIL' || code === 'ENOTFOUND')
    return `HOST=${host} is not an address of this machine. HOST=0.0.0.0 stands for all it has.`
  return `Port ${port} on ${host} cannot be served (${code}).`
}

/** A server that was just killed leaves its port in a moment: asked twice before it counts as taken. */
async function listenError(host: string, port: number): Promise<string | null> {
  const first = await tryListen(host, port)
  if (first !== 'EADDRINUSE') return first
  await pause(300)
  return tryListen(host, port)
}

function tryListen(host: string, port: number): Promise<string | null> {
  return new Promise((answer) => {
    const probe = net.createServer()
    probe.once('error', (error: NodeJS.ErrnoException) => answer(error.code ?? error.message))
    probe.listen(port, host, () => probe.close(() => answer(null)))
  })
}

/** The address to type into a browser: for "all addresses", one that other machines reach. */
export function shownUrl(host: string, port: number): string {
  const shown = host === '0.0.0.0' || host === '::' ? (networkAddress() ?? '127.0.0.1') : host
  return `http://${shown.includes(':') ? `[${shown}]` : shown}:${port}`
}

function networkAddress(): string | undefined {
  const all = Object.values(os.networkInterfaces()).flatMap((addresses) => addresses ?? [])
  return all.find(({ family, internal }) => family === 'IPv4' && !internal)?.address
}
