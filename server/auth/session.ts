import connectPgSimple from 'connect-pg-simple'
import session from 'express-session'
import type { RequestHandler } from 'express'
import type { Deps } from '../deps'

declare module 'express-session' {
  interface SessionData {
    shopId: string
    /** When this person went on, on the server's clock. */
    startedAt: string
    /** The enrolled device that this session belongs to. */
    deviceId: string
  }
}

export const sessionCookie = 'notchwise'
export const sessionHours = 12

/** Sessions in PostgreSQL, shared by HTTP and sockets. They are written at sign-in and sign-out only. */
export function sessionMiddleware(deps: Pick<Deps, 'pool' | 'sessionSecret' | 'secure' | 'log'>): {
  handler: RequestHandler
  close: () => void
} {
  const PgStore = connectPgSimple(session)
  const store = new PgStore({
    pool: deps.pool,
    tableName: 'session',
    disableTouch: true,
    pruneSessionInterval: 900,
    errorLog: (...args: unknown[]) => deps.log.warn({ args: args.map(String) }, 'session store'),
  })
  const handler = session({
    name: sessionCookie,
    store,
    secret: deps.sessionSecret,
    resave: false,
    saveUninitialized: false,
    cookie: { httpOnly: true, sameSite: 'lax', secure: deps.secure, maxAge: sessionHours * 3_600_000 },
  })
  return { handler, close: () => void store.close() }
}
