import { and, eq, gt, isNull, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type {
  beginFormBody,
  draftBody,
  FormView,
  makeFormLink,
  openDoor,
  submitForm,
} from '#shared/api/forms'
import type { BodyOf, IdsOf } from '#shared/api/define'
import { addDays } from '#shared/dates/days'
import { tokenHash } from '../auth/tokens'
import { doorLinks, formLinks, rentals, shops, shopTexts, sites } from '../db/schema/schema'
import type { Deps } from '../deps'
import { Problem } from '../errors'
import type { LinkActor, PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { addRental } from './rentals'
import { shopById, shopDay } from './shops'

const hour = 3_600_000
const linkLivesMs = 36 * hour

async function requireSite(context: CommandContext, siteId: string) {
  const own = await context.tx.$count(
    sites,
    and(eq(sites.id, siteId), eq(sites.shopId, context.actor.shopId)),
  )
  if (own === 0) throw new Problem('items.unknown')
}

/** Today's code at the door of a site; yesterday's ends. */
export const openDoorService: Service<BodyOf<typeof openDoor>, IdsOf<typeof openDoor>, PersonActor> = async (
  context,
  body,
) => {
  await requireSite(context, body.siteId)
  const { tx, actor } = context
  await tx
    .update(doorLinks)
    .set({ revokedAt: context.occurredAt })
    .where(and(eq(doorLinks.siteId, body.siteId), isNull(doorLinks.revokedAt)))
  const [row] = await tx
    .insert(doorLinks)
    .values({
      shopId: actor.shopId,
      siteId: body.siteId,
      tokenSha256: tokenHash(body.token),
      expiresAt: new Date(context.deps.now().getTime() + 16 * hour),
      createdBy: actor.personId,
    })
    .returning({ id: doorLinks.id })
  return { doorId: row!.id }
}

export const makeFormLinkService: Service<
  BodyOf<typeof makeFormLink>,
  IdsOf<typeof makeFormLink>,
  PersonActor
> = async (context, body) => {
  await requireSite(context, body.siteId)
  const [row] = await context.tx
    .insert(formLinks)
    .values({
      shopId: context.actor.shopId,
      siteId: body.siteId,
      tokenSha256: tokenHash(body.token),
      expiresAt: new Date(context.deps.now().getTime() + linkLivesMs),
    })
    .returning({ id: formLinks.id })
  return { linkId: row!.id }
}

/** A phone at the door begins a form; asking again with the same secret begins no second one. */
export async function beginForm(deps: Deps, { door, token }: z.infer<typeof beginFormBody>): Promise<void> {
  const now = deps.now()
  const [found] = await deps.db
    .select()
    .from(doorLinks)
    .where(
      and(
        eq(doorLinks.tokenSha256, tokenHash(door)),
        isNull(doorLinks.revokedAt),
        gt(doorLinks.expiresAt, now),
      ),
    )
  if (!found) throw new Problem('links.unknown')
  await deps.db
    .insert(formLinks)
    .values({
      shopId: found.shopId,
      siteId: found.siteId,
      tokenSha256: tokenHash(token),
      expiresAt: new Date(now.getTime() + linkLivesMs),
    })
    .onConflictDoNothing({ target: formLinks.tokenSha256 })
}

/** The renter's own form: their draft, or what became of it. */
export async function formOf(deps: Deps, actor: LinkActor): Promise<FormView> {
  const [found] = await deps.db
    .select({ link: formLinks, site: sites.name, shop: shops, rental: rentals })
    .from(formLinks)
    .innerJoin(sites, eq(sites.id, formLinks.siteId))
    .innerJoin(shops, eq(shops.id, formLinks.shopId))
    .leftJoin(rentals, eq(rentals.id, formLinks.rentalId))
    .where(eq(formLinks.id, actor.linkId))
  if (!found) throw new Problem('links.unknown')
  const { link, site, shop, rental } = found
  const reviewed = await deps.db.$count(
    shopTexts,
    and(
      eq(shopTexts.shopId, shop.id),
      eq(shopTexts.kind, 'skier_types'),
      sql`${shopTexts.reviewedAt} is not null`,
    ),
  )
  return {
    shop: shop.name,
    site,
    today: shopDay(shop, deps.now()),
    ageOfMajority: shop.ageOfMajority,
    sentencesReviewed: reviewed > 0,
    draft: link.submittedAt ? null : ((link.draft as FormView['draft']) ?? null),
    draftVersion: link.draftVersion,
    submitted: rental
      ? { number: rental.number, at: rental.arrivedAt.toISOString(), state: rental.state }
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
  if (!row) throw new Problem('command.stale')
  return row.version
}

/** The form is sent: the renter waits in the queue until the desk takes them. The draft ends with it. */
export const submitFormService: Service<
  BodyOf<typeof submitForm>,
  IdsOf<typeof submitForm>,
  LinkActor
> = async (context, form) => {
  const { tx, actor } = context
  const [link] = await tx.select().from(formLinks).where(eq(formLinks.id, actor.linkId)).for('update')
  if (!link) throw new Problem('links.unknown')
  if (link.submittedAt) throw new Problem('forms.sent')
  await requireSoon(context, form.startsOn)
  const { rentalId } = await addRental(context, form, {
    siteId: link.siteId,
    state: 'waiting',
    sources: { massSource: 'declared', massBy: null, heightSource: 'declared', heightBy: null },
  })
  await tx
    .update(formLinks)
    .set({ rentalId, submittedAt: context.occurredAt, draft: null })
    .where(eq(formLinks.id, link.id))
  return { rentalId }
}

/** A rental that begins years away is a slip of the finger. */
async function requireSoon(context: CommandContext, startsOn: string) {
  const today = shopDay(await shopById(context.tx, context.actor.shopId), context.deps.now())
  if (startsOn < today || startsOn > addDays(today, 366)) throw new Problem('forms.period')
}
