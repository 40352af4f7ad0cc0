import fs from 'node:fs'
import path from 'node:path'
import { fileURLToPath } from 'node:url'

/** What the start is told by its environment and arguments. */
export interface Config {
  host: string
  port: number
  /** The demo shop, or a shop of one's own. */
  demo: boolean
  /** `notchwise_demo` or `notchwise_shop`. */
  database: string
  dataDir: string
  logLevel: string
  /** Vite serves the client, with its own server in front of this one. */
  viteServes: boolean
  /** What this way of serving lacks, said at the start; empty on loopback. */
  lost: string[]
}

export class ConfigError extends Error {}

type Env = Record<string, string | undefined>

const root = fileURLToPath(new URL('..', import.meta.url))

/** The environment, and below it the lines of a `.env` file; the one reader of `process.env`. */
export function environment(): Env {
  const file = path.join(root, '.env')
  if (fs.existsSync(file)) process.loadEnvFile(file)
  return process.env
}

/** Reads the configuration; what cannot work is refused with a sentence that says what to do. */
export function readConfig(env: Env, args: readonly string[]): Config {
  const unknown = args.filter((arg) => arg !== '--real' && arg !== '--vite-serves')
  if (unknown.length > 0)
    throw new ConfigError(`Unknown: ${unknown.join(' ')}. The start takes --real and nothing else.`)
  if (env.DATABASE_URL) {
    throw new ConfigError(
      'DATABASE_URL is set, but a database elsewhere is not served yet. Unset it: Notchwise brings its own.',
    )
  }
  const host = env.HOST || '127.0.0.1'
  const loopback = isLoopback(host)
  if (!loopback && env.PLAIN_HTTP !== '1') {
    throw new ConfigError(
      `HOST=${host} is reached from other machines, and there is no TLS yet. PLAIN_HTTP=1 serves it all the same; then passwords and people's data cross the network unprotected.`,
    )
  }
  const demo = loopback && !args.includes('--real')
  return {
    host,
    port: readPort(env.PORT),
    demo,
    database: demo ? 'notchwise_demo' : 'notchwise_shop',
    dataDir: path.resolve(root, env.NOTCHWISE_DATA || '.data'),
    logLevel: readLogLevel(env.LOG_LEVEL),
    viteServes: args.includes('--vite-serves'),
    lost: loopback ? [] : lostWithoutTls,
  }
}

/** Whether a test runner started this process: then a test_ database may run without durability. */
export const underTests = () => process.env.NODE_ENV === 'test'

const lostWithoutTls = [
  'passwords and people’s data that nobody on the network can read',
  'cookies that only travel encrypted',
  'camera scanning',
  'work without a network',
  'keeping the screen awake',
]

/** 0 stands for any free port. */
function readPort(text = ''): number {
  if (text === '') return 4310
  const port = Number(text)
  if (!/^\d+$/.test(text) || port > 65535)
    throw new ConfigError(`PORT is ${text}; it is a number from 1 to 65535.`)
  return port
}

const logLevels = ['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent']

function readLogLevel(text = ''): string {
  if (text === '') return 'warn'
  if (!logLevels.includes(text))
    throw new ConfigError(`LOG_LEVEL is ${text}; it is one of ${logLevels.join(', ')}.`)
  return text
}

/** Whether only this machine reaches that address. */
export function isLoopback(host: string): boolean {
  return host === 'localhost' || host === '::1' || /^127(\.\d{1,3}){3}$/.test(host)
}
