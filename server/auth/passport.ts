import { Passport } from 'passport'
import { Strategy } from 'passport-local'
import { sql } from 'drizzle-orm'
import { people } from '../db/schema/schema'
import type { Deps } from '../deps'
import { secretFits } from './passwords'

/** What the session remembers of a person. */
export interface SessionUser {
  id: string
}

/** What a sign-in proved; only the id enters the session. */
export interface SignedIn extends SessionUser {
  passwordHash: string
}

/** E-mail and password; a disabled person is answered like an unknown one. */
export function passportFor(deps: Pick<Deps, 'db'>) {
  const passport = new Passport()
  passport.use(
    new Strategy({ usernameField: 'email', passwordField: 'password' }, (email, password, done) => {
      signInPerson(deps, email, password).then(
        (person) => done(null, person ?? false),
        (error: unknown) => done(error),
      )
    }),
  )
  passport.serializeUser((user, done) => done(null, (user as SessionUser).id))
  passport.deserializeUser((id: string, done) => done(null, { id }))
  return passport
}

async function signInPerson(
  deps: Pick<Deps, 'db'>,
  email: string,
  password: string,
): Promise<SignedIn | null> {
  const [person] = await deps.db
    .select({ id: people.id, passwordHash: people.passwordHash, disabledAt: people.disabledAt })
    .from(people)
    .where(sql`lower(${people.email}) = lower(${email})`)
  const fits = await secretFits(password, person && !person.disabledAt ? person.passwordHash : null)
  return person && fits ? { id: person.id, passwordHash: person.passwordHash } : null
}

export type AppPassport = ReturnType<typeof passportFor>
