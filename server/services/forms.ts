import { and, eq, isNotNull, isNull } from 'drizzle-orm'
import type { z } from 'zod'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type {
  beginFormBody,
  closeDoor,
  draftBody,
  endFormLinks,
  FormView,
  makeFormLink,
  openDoor,
  submitForm,
} from '#shared/api/forms'
import { dayStart, endOfDayAfter } from '#shared/dates/dayStart'
import { addDays } from '#shared/dates/days'
import type { RentalState } from '#shared/lifecycle/fittingStates'
import type { RenterForm } from '#shared/schemas/renters'
import { tokenHash } from '../auth/tokens'
import { doorLinks, formLinks, rentals, renters, shops, sites } from '../db/schema/schema'
import type { Deps } from '../deps'
import { Problem } from '../errors'
import type { LinkActor, PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { addRental, usableForm } from './rentals'
import { addInputs, carriedRequest, contactColumns, lockRental, replaceInputs } from './renters'
import { requireSite, shopById, shopDay } from './shops'
import { sentencesReviewed } from './texts'

/** A link lives until the shop's day after tomorrow begins, or the day after the rental ends. */
const linkLivesDays = 1

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

/** The code at the door of a site, until the shop's day is over. */
export const openDoorService: Does<typeof openDoor> = async (context, { siteId, token }) => {
  const { tx, actor, deps } = context
  await requireSite(tx, actor.shopId, siteId)
  const { zone } = await shopById(tx, actor.shopId)
  const [row] = await tx
    .insert(doorLinks)
    .values({
      shopId: actor.shopId,
      siteId,
      tokenSha256: tokenHash(token),
      expiresAt: endOfDayAfter(deps.now(), zone),
      createdBy: actor.personId,
    })
    .returning({ id: doorLinks.id })
  return { doorId: row!.id }
}

/** Every code at a site's door ends now; who has begun a form keeps it. */
export const closeDoorService: Does<typeof closeDoor> = async (context, { siteId }) => {
  await requireSite(context.tx, context.actor.shopId, siteId)
  await context.tx
    .update(doorLinks)
    .set({ revokedAt: context.deps.now() })
    .where(
      and(
        eq(doorLinks.shopId, context.actor.shopId),
        eq(doorLinks.siteId, siteId),
        isNull(doorLinks.revokedAt),
      ),
    )
  return {}
}

export const makeFormLinkService: Does<typeof makeFormLink> = async (
  context,
  { siteId, token, rentalId },
) => {
  const { tx, actor, deps } = context
  await requireSite(tx, actor.shopId, siteId)
  const { zone } = await shopById(tx, actor.shopId)
  const rental = rentalId ? (await lockRental(context, rentalId)).rental : null
  if (rental && rental.state !== 'waiting' && rental.state !== 'open')
    throw new Problem('rentals.state', { state: rental.state })
  const soon = endOfDayAfter(deps.now(), zone, linkLivesDays)
  const after = rental ? dayStart(addDays(rental.endsOn, 1 + linkLivesDays), zone) : soon
  const [row] = await tx
    .insert(formLinks)
    .values({
      shopId: actor.shopId,
      siteId: rental?.siteId ?? siteId,
      rentalId,
      tokenSha256: tokenHash(token),
      expiresAt: after > soon ? after : soon,
    })
    .returning({ id: formLinks.id })
  return { linkId: row!.id }
}

export const endFormLinksService: Does<typeof endFormLinks> = async (context, { rentalId }) => {
  await lockRental(context, rentalId)
  await context.tx
    .update(formLinks)
    .set({ revokedAt: context.deps.now(), draft: null })
    .where(and(eq(formLinks.rentalId, rentalId), isNull(formLinks.revokedAt)))
  return {}
}

/** A phone at the door begins a form; asking again with the same secret begins no second one. */
export async function beginForm(deps: Deps, { door, token }: z.infer<typeof beginFormBody>): Promise<void> {
  const now = deps.now()
  const [found] = await deps.db
    .select({ link: doorLinks, zone: shops.zone })
    .from(doorLinks)
    .innerJoin(shops, eq(shops.id, doorLinks.shopId))
    .where(eq(doorLinks.tokenSha256, tokenHash(door)))
  if (!found || found.link.revokedAt) throw new Problem('links.unknown')
  if (found.link.expiresAt <= now) throw new Problem('links.expired')
  await deps.db
    .insert(formLinks)
    .values({
      shopId: found.link.shopId,
      siteId: found.link.siteId,
      tokenSha256: tokenHash(token),
      expiresAt: endOfDayAfter(now, found.zone, linkLivesDays),
    })
    .onConflictDoNothing({ target: formLinks.tokenSha256 })
}

/** The renter's own form: their draft, or what became of it. */
export async function formOf(deps: Deps, actor: LinkActor): Promise<FormView> {
  const [found] = await deps.db
    .select({ link: formLinks, site: sites.name, shop: shops, rental: rentals, renter: renters })
    .from(formLinks)
    .innerJoin(sites, eq(sites.id, formLinks.siteId))
    .innerJoin(shops, eq(shops.id, formLinks.shopId))
    .leftJoin(rentals, eq(rentals.id, formLinks.rentalId))
    .leftJoin(renters, eq(renters.id, rentals.renterId))
    .where(eq(formLinks.id, actor.linkId))
  if (!found) throw new Problem('links.unknown')
  const { link, site, shop, rental, renter } = found
  const sent = link.submittedAt !== null && rental !== null
  return {
    shop: shop.name,
    site,
    today: shopDay(shop, deps.now()),
    ageOfMajority: shop.ageOfMajority,
    sentencesReviewed: await sentencesReviewed(deps.db, shop.id),
    draft: link.submittedAt ? null : ((link.draft as FormView['draft']) ?? null),
    draftVersion: link.draftVersion,
    known:
      renter && rental && !sent
        ? {
            firstName: renter.firstName,
            lastName: renter.lastName,
            startsOn: rental.startsOn,
            endsOn: rental.endsOn,
          }
        : null,
    submitted: sent
      ? {
          number: rental.number,
          at: rental.arrivedAt.toISOString(),
          promisedAt: rental.promisedAt.toISOString(),
          state: rental.state as RentalState,
        }
      : null,
  }
}

/** Keeps a draft; one that is older than what is kept is refused, so that two tabs cannot undo each other. */
export async function saveDraft(
  deps: Deps,
  actor: LinkActor,
  { version, draft }: z.infer<typeof draftBody>,
): Promise<number> {
  const [row] = await deps.db
    .update(formLinks)
    .set({ draft, draftVersion: version + 1 })
    .where(
      and(eq(formLinks.id, actor.linkId), eq(formLinks.draftVersion, version), isNull(formLinks.submittedAt)),
    )
    .returning({ version: formLinks.draftVersion })
  if (row) return row.version
  const sent = await deps.db.$count(
    formLinks,
    and(eq(formLinks.id, actor.linkId), isNotNull(formLinks.submittedAt)),
  )
  throw new Problem(sent > 0 ? 'forms.sent' : 'command.stale')
}

const declared = { massSource: 'declared', massBy: null, heightSource: 'declared', heightBy: null } as const

/** The form is sent: the renter waits until the desk takes them, or their rental has new data. The draft ends. */
export const submitFormService: Service<
  BodyOf<typeof submitForm>,
  IdsOf<typeof submitForm>,
  LinkActor
> = async (context, form) => {
  const { tx, actor, deps } = context
  const [link] = await tx.select().from(formLinks).where(eq(formLinks.id, actor.linkId)).for('update')
  if (!link) throw new Problem('links.unknown')
  if (link.submittedAt) throw new Problem('forms.sent')
  // A phone's clock says nothing about when somebody came: the server's own counts.
  const now = deps.now()
  const arrival = { siteId: link.siteId, state: 'waiting', arrivedAt: now, sources: declared } as const
  const rentalId = link.rentalId
    ? await updateRental(context, link.rentalId, form)
    : (await addRental(context, form, arrival)).rentalId
  await tx.update(formLinks).set({ rentalId, submittedAt: now, draft: null }).where(eq(formLinks.id, link.id))
  return { rentalId }
}

/** The renter says anew what the shop has of them; a changed value voids what was fitted before. */
async function updateRental(context: CommandContext, rentalId: string, form: RenterForm): Promise<string> {
  const { tx } = context
  const { rental, renter, inputs } = await lockRental(context, rentalId)
  if (rental.state !== 'waiting' && rental.state !== 'open')
    throw new Problem('rentals.state', { state: rental.state })
  const { age } = await usableForm(context, form)
  const { mass, height, skierType, startsOn, endsOn, ownBoots, shoe, wishes, birthDate } = form
  await tx
    .update(renters)
    .set({ ...contactColumns(form), birthDate, version: renter.version + 1 })
    .where(eq(renters.id, renter.id))
  await tx
    .update(rentals)
    .set({ startsOn, endsOn, ownBoots, shoe, wishes, version: rental.version + 1 })
    .where(eq(rentals.id, rentalId))
  const values = { ...declared, mass, height, skierType, age }
  if (inputs) await replaceInputs(context, inputs, { ...values, ...carriedRequest(inputs, values) })
  else await addInputs(context, renter.id, values)
  context.touchRental(rentalId)
  return rentalId
}
