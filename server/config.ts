import path from 'node:path'

/** What the start is told by its environment and arguments; the one reader of `process.env`. */
export interface Config {
  host: string
  port: number
  /** The demo shop, or a shop of one's own. */
  demo: boolean
  loopback: boolean
  dataDir: string
  logLevel: string
  /** What this way of serving lacks, said at the start; empty on loopback. */
  lost: string[]
}

export class ConfigError extends Error {}

const root = path.resolve(new URL('..', import.meta.url).pathname)

/** Reads the configuration; what cannot work is refused with a sentence that says what to do. */
export function readConfig(env: NodeJS.ProcessEnv, args: readonly string[]): Config {
  const unknown = args.filter((arg) => arg !== '--real')
  if (unknown.length > 0)
    throw new ConfigError(`Unknown: ${unknown.join(' ')}. The start takes --real and nothing else.`)
  if (env.DATABASE_URL) {
    throw new ConfigError(
      'DATABASE_URL is set, but a database elsewhere is not served yet. Unset it: Notchwise brings its own.',
    )
  }
  const host = env.HOST || '127.0.0.1'
  const port = Number(env.PORT || 4310)
  if (!Number.isInteger(port) || port < 0 || port > 65535)
    throw new ConfigError(`PORT is ${env.PORT}; it is a number from 1 to 65535.`)
  const loopback = isLoopback(host)
  if (!loopback && env.PLAIN_HTTP !== '1') {
    throw new ConfigError(
      `HOST=${host} is reached from other machines, and there is no TLS yet. PLAIN_HTTP=1 serves it all the same; then passwords and people's data cross the network unprotected.`,
    )
  }
  return {
    host,
    port,
    loopback,
    demo: loopback && !args.includes('--real'),
    dataDir: path.resolve(root, env.NOTCHWISE_DATA || '.data'),
    logLevel: env.LOG_LEVEL || 'warn',
    lost: loopback
      ? []
      : [
          'camera scanning',
          'work without a network',
          'keeping the screen awake',
          'cookies that only travel encrypted',
        ],
  }
}

/** Whether only this machine reaches that address. */
export function isLoopback(host: string): boolean {
  return host === 'localhost' || host === '::1' || /^127(\.\d{1,3}){3}$/.test(host)
}
