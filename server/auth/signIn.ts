import type { Request, RequestHandler } from 'express'
import { eq } from 'drizzle-orm'
import { people } from '../db/schema/schema'
import type { Deps } from '../deps'
import { Problem } from '../errors'
import { keepOneSessionAt, sessionStands } from '../services/sessions'
import { enrolledDevice, personActor } from './actors'
import type { AppPassport, SignedIn } from './passport'
import type { PersonActor } from '../services/actor'

/** The person whose e-mail and password the body holds. Throws session.wrong_credentials for anybody else. */
export function authenticated(
  passport: AppPassport,
  ...[req, res, next]: Parameters<RequestHandler>
): Promise<SignedIn> {
  return new Promise((done, failed) => {
    const check = passport.authenticate('local', (error: unknown, user: SignedIn | false) => {
      if (error) failed(error as Error)
      else if (!user) failed(new Problem('session.wrong_credentials'))
      else done(user)
    }) as (...args: unknown[]) => void
    check(req, res, next)
  })
}

/**
 * A new session with a new id for this person: what somebody planted before, or whoever was signed in here before,
 * is worth nothing from now on. At an enrolled device it is the only session of the device.
 */
export async function startSession(
  deps: Deps,
  req: Request,
  personId: string,
  shopId: string,
): Promise<PersonActor> {
  const before = req.sessionID
  const device = await enrolledDevice(deps, req)
  await new Promise<void>((done, failed) => {
    req.login({ id: personId }, (error: unknown) => {
      if (error) return failed(error as Error)
      req.session.shopId = shopId
      req.session.startedAt = deps.now().toISOString()
      if (device?.shopId === shopId) req.session.deviceId = device.id
      req.session.save((e: unknown) => (e ? failed(e as Error) : done()))
    })
  })
  writeNoMore(req)
  // Screens of the one before hear of it once this browser holds the new cookie: then they ask who is here now.
  req.res?.once('finish', () => deps.dropSockets({ sessionId: before }))
  if (req.session.deviceId) {
    await keepOneSessionAt(deps, req.session.deviceId)
    if (!(await sessionStands(deps, req.sessionID))) {
      await endSession(req)
      throw new Problem('session.switched')
    }
  }
  const actor = await personActor(deps, req)
  if (!actor) {
    await endSession(req)
    throw new Problem('session.wrong_credentials')
  }
  return actor
}

/**
 * At the end of a request express-session writes a new session once more; one that was ended meanwhile (by who went
 * on in the same moment, or by a manager) would stand again.
 */
function writeNoMore({ session }: Request) {
  session.save = (done) => {
    done?.(undefined)
    return session
  }
}

/** Ends this request's session, in the store too. */
export function endSession(req: Request): Promise<void> {
  return new Promise((done, failed) =>
    req.session.destroy((error: unknown) => (error ? failed(error as Error) : done())),
  )
}

/** Whether the password that was proved is still the person's: it may have been changed meanwhile. */
export async function requireSamePassword(deps: Pick<Deps, 'db'>, req: Request, user: SignedIn) {
  const [person] = await deps.db
    .select({ passwordHash: people.passwordHash })
    .from(people)
    .where(eq(people.id, user.id))
  if (person?.passwordHash === user.passwordHash) return
  await endSession(req)
  throw new Problem('session.wrong_credentials')
}
