import { createServer } from 'node:http'
import type { AddressInfo } from 'node:net'
import { createApp } from './app'
import { underTests } from './config'
import { openDb } from './db/client'
import { requireDurable } from './db/durability'
import type { Deps } from './deps'
import { startJobs } from './jobs/jobs'
import { createLog } from './log'
import { attachSockets, type Sockets } from './sockets/sockets'

export interface ServerOptions {
  /** The application role's address of the database. */
  databaseUrl: string
  host: string
  port: number
  sessionSecret: string
  secure: boolean
  demo: boolean
  origins: string[]
  clientDir: string | null
  logLevel: string
  now?: () => Date
}

export interface RunningServer {
  url: string
  port: number
  deps: Deps
  close: () => Promise<void>
}

/**
 * Serves client, API and sockets, on a database that keeps what it confirmed. Closing refuses new work, lets running
 * requests end, then leaves the database.
 */
export async function startServer(options: ServerOptions): Promise<RunningServer> {
  const log = createLog(options.logLevel)
  const { db, pool, close: closeDb } = openDb(options.databaseUrl)
  await requireDurable(pool, { testing: underTests() }).catch(async (error) => {
    await closeDb()
    throw error
  })
  const live: Partial<Sockets> = {}
  const deps: Deps = {
    db,
    pool,
    log,
    now: options.now ?? (() => new Date()),
    sessionSecret: options.sessionSecret,
    secure: options.secure,
    demo: options.demo,
    origins: options.origins,
    clientDir: options.clientDir,
    publish: (shopId, event) => live.publish?.(shopId, event),
    dropSockets: (who) => live.dropSockets?.(who),
  }
  const app = createApp(deps)
  const http = createServer(app.express)
  const sockets = attachSockets(http, deps, app.session)
  Object.assign(live, sockets)
  const jobs = startJobs(deps)
  await new Promise<void>((listening, failed) => {
    http.once('error', failed)
    http.listen(options.port, options.host, () => {
      http.off('error', failed)
      listening()
    })
  })
  const { port } = http.address() as AddressInfo
  const shownHost = options.host.includes(':') ? `[${options.host}]` : options.host
  return {
    url: `http://${shownHost}:${port}`,
    port,
    deps,
    close: async () => {
      jobs.stop()
      await sockets.close()
      http.closeIdleConnections()
      await new Promise<void>((done) => (http.listening ? http.close(() => done()) : done()))
      app.close()
      await closeDb()
    },
  }
}
