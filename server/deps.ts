import type pg from 'pg'
import type { Logger } from 'pino'
import type { BoardEvent } from '#shared/schemas/board'
import type { Db } from './db/client'

/** Everything that the server's code is given from outside; tests give their own. */
export interface Deps {
  db: Db
  pool: pg.Pool
  log: Logger
  /** The one clock. */
  now: () => Date
  /** Signs session and CSRF cookies. */
  sessionSecret: string
  /** Cookies only over TLS. */
  secure: boolean
  /** The demo shop on loopback: the sign-in page may show its invented sign-ins. */
  demo: boolean
  /** Origins that may change anything; the request's own host is always one of them. */
  origins: string[]
  /** Tells every screen of the shop; called after commit. */
  publish: (shopId: string, event: BoardEvent) => void
  /** Ends sockets at once when a person is disabled, signs out or changes roles. */
  dropSockets: (who: { personId?: string; sessionId?: string }) => void
  /** The folder of the built client; null in tests and in development, where Vite serves it. */
  clientDir: string | null
}

export type Tx = Parameters<Parameters<Db['transaction']>[0]>[0]
/** A transaction or the pool: what a read needs. */
export type Reader = Db | Tx
