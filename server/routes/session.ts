import type { Request } from 'express'
import { sessionAnswer, signInBody } from '#shared/api/session'
import { signInLimit } from '../auth/limits'
import type { AppPassport, SessionUser } from '../auth/passport'
import { sessionCookie } from '../auth/session'
import { Problem } from '../errors'
import { personActor } from '../auth/actors'
import { homeShop, sessionOf } from '../services/sessions'
import type { Route } from './route'

/** Signing in and out, and who is signed in. */
export function sessionRoutes(passport: AppPassport): Route[] {
  return [
    {
      method: 'get',
      path: '/api/session',
      access: 'open',
      schemas: { answer: sessionAnswer.nullable() },
      handle: (deps) => async (req, res) => {
        res.json(req.actor?.kind === 'person' ? sessionAnswer.parse(await sessionOf(deps, req.actor)) : null)
      },
    },
    {
      method: 'post',
      path: '/api/session',
      access: 'open',
      schemas: { body: signInBody, answer: sessionAnswer },
      before: [signInLimit()],
      handle: (deps) => async (req, res, next) => {
        signInBody.parse(req.body)
        const user = await authenticated(passport, req, res, next)
        const shopId = await homeShop(deps, user.id)
        await startSession(req, user, shopId)
        const actor = await personActor(deps, req)
        if (!actor) throw new Problem('session.wrong_credentials')
        res.status(201).json(sessionAnswer.parse(await sessionOf(deps, actor)))
      },
    },
    {
      method: 'delete',
      path: '/api/session',
      access: 'open',
      schemas: {},
      handle: (deps) => async (req, res) => {
        const sessionId = req.sessionID
        await new Promise<void>((done, failed) =>
          req.session.destroy((e: unknown) => (e ? failed(e as Error) : done())),
        )
        deps.dropSockets({ sessionId })
        res.clearCookie(sessionCookie).status(204).end()
      },
    },
  ]
}

function authenticated(
  passport: AppPassport,
  req: Request,
  res: Parameters<ReturnType<Route['handle']>>[1],
  next: Parameters<ReturnType<Route['handle']>>[2],
): Promise<SessionUser> {
  return new Promise((done, failed) => {
    const check = passport.authenticate('local', (error: unknown, user: SessionUser | false) => {
      if (error) failed(error as Error)
      else if (!user) failed(new Problem('session.wrong_credentials'))
      else done(user)
    }) as (...args: unknown[]) => void
    check(req, res, next)
  })
}

/** A new session id for a new person: what somebody planted before is worth nothing. */
export function startSession(req: Request, user: SessionUser, shopId: string): Promise<void> {
  return new Promise((done, failed) => {
    req.login(user, (error: unknown) => {
      if (error) return failed(error as Error)
      req.session.shopId = shopId
      req.session.save((e: unknown) => (e ? failed(e as Error) : done()))
    })
  })
}
