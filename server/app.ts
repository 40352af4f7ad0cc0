import path from 'node:path'
import express, { type Express, type RequestHandler } from 'express'
import helmet from 'helmet'
import { pinoHttp } from 'pino-http'
import { sql } from 'drizzle-orm'
import { findActor } from './auth/actors'
import { linkLimit } from './auth/limits'
import { passportFor } from './auth/passport'
import { sessionMiddleware } from './auth/session'
import type { Deps } from './deps'
import { requireAccess } from './middleware/access'
import { requireOwnOrigin } from './middleware/origin'
import { answerProblems, unknownRoute } from './middleware/problems'
import { routes } from './routes/routes'

export interface App {
  express: Express
  /** The same session and person for sockets. */
  session: RequestHandler[]
  close: () => void
}

/** The application over what it is given; it never listens. */
export function createApp(deps: Deps): App {
  const app = express()
  const store = sessionMiddleware(deps)
  const passport = passportFor(deps)
  const session = [store.handler, passport.session()]

  app.disable('x-powered-by')
  app.set('trust proxy', false)
  app.use(securityHeaders(deps.secure))
  app.get('/livez', (_req, res) => void res.json({ live: true }))
  app.get('/readyz', async (_req, res) => {
    await deps.db.execute(sql`select 1`)
    res.json({ ready: true })
  })
  app.use(requestLog(deps))
  app.use('/api', requireOwnOrigin(deps.origins), express.json({ limit: '1mb' }), ...session, findActor(deps))
  app.use('/api', (_req, res, next) => {
    res.set('cache-control', 'no-store')
    next()
  })
  const links = linkLimit()
  for (const route of routes(passport)) {
    const guessing = route.access === 'link' ? [links] : []
    app[route.method](
      route.path,
      ...guessing,
      requireAccess(route.access),
      ...(route.before ?? []),
      route.handle(deps),
    )
  }
  app.use('/api', unknownRoute)
  if (deps.clientDir) serveClient(app, deps.clientDir)
  app.use(answerProblems(deps))
  return { express: app, session, close: store.close }
}

/** Headers of every answer. Styles may be inline because the component library writes its own at run time. */
function securityHeaders(secure: boolean): RequestHandler {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'"],
        styleSrc: ["'self'", "'unsafe-inline'"],
        imgSrc: ["'self'", 'data:', 'blob:'],
        connectSrc: ["'self'", 'ws:', 'wss:'],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
        ...(secure ? { upgradeInsecureRequests: [] } : {}),
      },
    },
    hsts: secure,
    crossOriginOpenerPolicy: secure,
    originAgentCluster: secure,
    referrerPolicy: { policy: 'no-referrer' },
  })
}

/** One line a request, without bodies, query strings, cookies, names or tokens. */
function requestLog(deps: Deps): RequestHandler {
  return pinoHttp({
    logger: deps.log,
    autoLogging: { ignore: (req) => req.method === 'GET' },
    serializers: {
      req: (req: { method: string; url: string }) => ({ method: req.method, path: req.url.split('?')[0] }),
      res: (res: { statusCode: number }) => ({ status: res.statusCode }),
    },
  })
}

/** The built client: hashed files are kept for good, the page itself never. */
function serveClient(app: Express, dir: string) {
  app.use(express.static(dir, { index: false, setHeaders: cacheHashed }))
  app.get('/{*path}', (req, res, next) => {
    if (req.path.startsWith('/assets/')) return next()
    res.set('cache-control', 'no-cache').sendFile(path.join(dir, 'index.html'))
  })
}

function cacheHashed(res: { setHeader: (name: string, value: string) => void }, file: string) {
  const hashed = file.includes(`${path.sep}assets${path.sep}`)
  res.setHeader('cache-control', hashed ? 'public, max-age=31536000, immutable' : 'no-cache')
}
