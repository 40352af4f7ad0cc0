import { and, arrayContains, asc, eq, isNull, ne, sql } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type {
  changePerson,
  createPerson,
  disablePerson,
  enablePerson,
  PersonRow,
  setPasswordBody,
} from '#shared/api/people'
import { pinTriesAllowed } from '#shared/pins/pinRules'
import type { Role } from '#shared/permissions'
import type { z } from 'zod'
import { hashSecret } from '../auth/passwords'
import { memberships, people } from '../db/schema/schema'
import type { Deps, Reader, Tx } from '../deps'
import { isDuplicate, Problem } from '../errors'
import type { PersonActor } from './actor'
import type { Service } from './commands'
import { changedFields, noteOfficeChange } from './office'
import { endSessions } from './sessions'
import { lockShop } from './shops'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

/** Everybody of the shop, those with access first. */
export async function peopleOf(db: Reader, shopId: string): Promise<PersonRow[]> {
  const rows = await db
    .select({ person: people, member: memberships })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(eq(memberships.shopId, shopId))
    .orderBy(sql`${memberships.endedAt} is not null`, asc(people.name), asc(people.id))
  return rows.map(({ person, member }) => ({
    id: person.id,
    name: person.name,
    email: person.email,
    roles: member.roles as Role[],
    locale: person.locale,
    hasPassword: person.passwordHash !== '',
    hasPin: member.pinHash !== null,
    pinLocked: member.pinTries >= pinTriesAllowed,
    disabledAt: (member.endedAt ?? person.disabledAt)?.toISOString() ?? null,
  }))
}

/** Those who work in the shop now. */
export async function colleaguesOf(db: Reader, shopId: string) {
  const rows = await db
    .select({ id: people.id, name: people.name, roles: memberships.roles })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(and(eq(memberships.shopId, shopId), isNull(memberships.endedAt), isNull(people.disabledAt)))
    .orderBy(asc(people.name), asc(people.id))
  return rows.map((row) => ({ ...row, roles: row.roles as Role[] }))
}

export const createPersonService: Does<typeof createPerson> = async (context, body) => {
  const { tx, actor } = context
  const { roles, ...values } = body
  const [person] = await orTaken(
    tx
      .insert(people)
      .values({ ...values, passwordHash: '' })
      .returning(),
  )
  await tx.insert(memberships).values({ shopId: actor.shopId, personId: person!.id, roles })
  await noteOfficeChange(context, 'people.create', person!.id, Object.keys(body))
  return { personId: person!.id }
}

/** Name, e-mail, roles, language. Whoever belongs to another shop too keeps what that shop sees of them. */
export const changePersonService: Does<typeof changePerson> = async (context, { personId, ...body }) => {
  const { tx, actor } = context
  const { person, member } = await lockedMember(tx, actor.shopId, personId)
  const before = { name: person.name, email: person.email, locale: person.locale, roles: member.roles }
  const fields = changedFields(before, body)
  const { roles, ...values } = body
  if (fields.some((field) => field !== 'roles')) await requireOnlyHere(tx, actor.shopId, personId)
  if (member.roles.includes('manager') && !roles.includes('manager'))
    await requireOtherManager(tx, actor.shopId, personId)
  await orTaken(tx.update(people).set(values).where(eq(people.id, personId)))
  await tx.update(memberships).set({ roles }).where(isMember(actor.shopId, personId))
  await noteOfficeChange(context, 'people.change', personId, fields)
  return { personId }
}

export const disablePersonService: Does<typeof disablePerson> = async (context, { personId }) => {
  const { tx, actor } = context
  const { member } = await lockedMember(tx, actor.shopId, personId)
  if (member.roles.includes('manager')) await requireOtherManager(tx, actor.shopId, personId)
  if (member.endedAt === null) {
    await tx.update(memberships).set({ endedAt: context.occurredAt }).where(isMember(actor.shopId, personId))
    await noteOfficeChange(context, 'people.disable', personId, ['access'])
  }
  return { personId }
}

export const enablePersonService: Does<typeof enablePerson> = async (context, { personId }) => {
  const { tx, actor } = context
  const { member } = await lockedMember(tx, actor.shopId, personId)
  if (member.endedAt !== null) {
    await tx.update(memberships).set({ endedAt: null }).where(isMember(actor.shopId, personId))
    await noteOfficeChange(context, 'people.enable', personId, ['access'])
  }
  return { personId }
}

/** A password that a manager hands to a person; every session of theirs ends but the one that asks. */
export async function setPassword(
  deps: Deps,
  actor: PersonActor,
  { personId, password }: z.infer<typeof setPasswordBody>,
  sessionId: string,
): Promise<void> {
  const passwordHash = await hashSecret(password)
  await deps.db.transaction(async (tx) => {
    await lockedMember(tx, actor.shopId, personId)
    await requireOnlyHere(tx, actor.shopId, personId)
    await tx.update(people).set({ passwordHash }).where(eq(people.id, personId))
    await tx.update(memberships).set({ pinTries: 0 }).where(eq(memberships.personId, personId))
    await noteOfficeChange(
      { tx, actor, commandId: null, occurredAt: deps.now() },
      'people.set_password',
      personId,
      ['password'],
    )
  })
  await endSessions(deps, personId, sessionId)
}

const isMember = (shopId: string, personId: string) =>
  and(eq(memberships.shopId, shopId), eq(memberships.personId, personId))

/** Who is changed; changes of people come one by one, so that two managers who end each other leave one. */
async function lockedMember(tx: Tx, shopId: string, personId: string) {
  await lockShop(tx, shopId)
  const [found] = await tx
    .select({ person: people, member: memberships })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(isMember(shopId, personId))
  if (!found) throw new Problem('people.unknown')
  return found
}

/** Somebody else must be left who can sign in and manage the shop. */
async function requireOtherManager(tx: Tx, shopId: string, personId: string) {
  const managers = await tx
    .select({ id: people.id })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(
      and(
        eq(memberships.shopId, shopId),
        arrayContains(memberships.roles, ['manager']),
        isNull(memberships.endedAt),
        isNull(people.disabledAt),
        ne(people.passwordHash, ''),
      ),
    )
  if (!managers.some(({ id }) => id !== personId)) throw new Problem('people.last_manager')
}

/** One shop's manager does not decide over the sign-in of somebody who also works for another. */
async function requireOnlyHere(tx: Tx, shopId: string, personId: string) {
  const elsewhere = await tx.$count(
    memberships,
    and(eq(memberships.personId, personId), ne(memberships.shopId, shopId), isNull(memberships.endedAt)),
  )
  if (elsewhere > 0) throw new Problem('people.other_shop')
}

async function orTaken<T>(work: PromiseLike<T>): Promise<T> {
  try {
    return await work
  } catch (error) {
    throw isDuplicate(error, 'people_email') ? new Problem('people.email_taken') : error
  }
}
