import {
  demoAnswer,
  ownPasswordBody,
  ownPinBody,
  sessionAnswer,
  setupAnswer,
  setupBody,
  signInBody,
  stationAnswer,
  switchBody,
} from '#shared/api/session'
import { enrolledDevice } from '../auth/actors'
import { guessLimit, secretLimit, signInLimit } from '../auth/limits'
import type { AppPassport } from '../auth/passport'
import { sessionCookie } from '../auth/session'
import { authenticated, endSession, requireSamePassword, startSession } from '../auth/signIn'
import { Problem } from '../errors'
import { actorOf } from '../middleware/access'
import type { PersonActor } from '../services/actor'
import { demoPeople } from '../services/demo'
import { provePin, setPin, unlockPin } from '../services/pins'
import { changeOwnPassword, homeShop, requirePassword, sessionOf } from '../services/sessions'
import { setUpShop, setupIsOpen } from '../services/setup'
import { stationOf } from '../services/stations'
import type { Route } from './route'

/** Signing in and out, who is signed in, and a person's own password and PIN. */
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
        const actor = await startSession(deps, req, user.id, await homeShop(deps, user.id))
        await requireSamePassword(deps, req, user)
        await unlockPin(deps, user.id)
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
        await endSession(req)
        deps.dropSockets({ sessionId })
        res.clearCookie(sessionCookie).status(204).end()
      },
    },
    {
      method: 'post',
      path: '/api/session/pin',
      access: 'signed_in',
      schemas: { body: ownPinBody },
      before: [guessLimit('own-pin')],
      handle: (deps) => async (req, res) => {
        const { password, pin } = ownPinBody.parse(req.body)
        const actor = actorOf<PersonActor>(req)
        await requirePassword(deps, actor.personId, password)
        await setPin(deps, actor, pin)
        res.status(204).end()
      },
    },
    {
      method: 'post',
      path: '/api/session/password',
      access: 'signed_in',
      schemas: { body: ownPasswordBody },
      before: [guessLimit('own-password')],
      handle: (deps) => async (req, res) => {
        const { password, newPassword } = ownPasswordBody.parse(req.body)
        const { personId } = actorOf<PersonActor>(req)
        await requirePassword(deps, personId, password)
        await changeOwnPassword(deps, personId, newPassword, req.sessionID)
        res.status(204).end()
      },
    },
  ]
}

/** What a browser may ask before anybody is signed in: the station it is, the demo's sign-ins, the first start. */
export const doorRoutes = (): Route[] => [
  {
    method: 'get',
    path: '/api/station',
    access: 'open',
    schemas: { answer: stationAnswer },
    handle: (deps) => async (req, res) => {
      const device = await enrolledDevice(deps, req)
      const { actor, sessionID: sessionId } = req
      const here = actor?.kind === 'person' ? { personId: actor.personId, sessionId } : null
      res.json(stationAnswer.parse(device ? await stationOf(deps, device.id, here) : null))
    },
  },
  {
    method: 'post',
    path: '/api/session/switch',
    access: 'open',
    schemas: { body: switchBody, answer: sessionAnswer },
    handle: (deps) => async (req, res) => {
      const { personId, pin } = switchBody.parse(req.body)
      const device = await enrolledDevice(deps, req)
      if (!device) throw new Problem('pin.not_enrolled')
      const { shopId } = device
      await provePin(deps, { shopId, deviceId: device.id, pin }, personId)
      const actor = await startSession(deps, req, personId, shopId)
      res.status(201).json(sessionAnswer.parse(await sessionOf(deps, actor)))
    },
  },
  {
    method: 'get',
    path: '/api/session/demo',
    access: 'open',
    schemas: { answer: demoAnswer },
    handle: (deps) => async (_req, res) => {
      res.json(demoAnswer.parse(await demoPeople(deps)))
    },
  },
  {
    method: 'get',
    path: '/api/setup',
    access: 'open',
    schemas: { answer: setupAnswer },
    handle: (deps) => async (_req, res) => {
      res.json({ open: await setupIsOpen(deps.db) })
    },
  },
  {
    method: 'post',
    path: '/api/setup',
    access: 'open',
    schemas: { body: setupBody, answer: sessionAnswer },
    before: [secretLimit()],
    handle: (deps) => async (req, res) => {
      const { personId, shopId } = await setUpShop(deps, setupBody.parse(req.body))
      const actor = await startSession(deps, req, personId, shopId)
      res.status(201).json(sessionAnswer.parse(await sessionOf(deps, actor)))
    },
  },
]
