import { and, desc, eq, isNotNull } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type { readOwnBoots, secondLook } from '#shared/api/rentals'
import { fittings, ownBoots } from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { doubtFittings } from './doubt'
import { lockRental } from './renters'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

async function latestReading(context: CommandContext, rentalId: string) {
  const [row] = await context.tx
    .select()
    .from(ownBoots)
    .where(eq(ownBoots.rentalId, rentalId))
    .orderBy(desc(ownBoots.recordedAt), desc(ownBoots.id))
    .limit(1)
  return row ?? null
}

/** The renter's own boots, as somebody read and judged them now; what was fitted to another reading is in doubt. */
export const readOwnBootsService: Does<typeof readOwnBoots> = async (context, body) => {
  const { rental } = await lockRental(context, body.rentalId)
  const before = await latestReading(context, rental.id)
  const [row] = await context.tx
    .insert(ownBoots)
    .values({
      ...body,
      shopId: context.actor.shopId,
      judgedBy: context.actor.personId,
      occurredAt: context.occurredAt,
    })
    .returning({ id: ownBoots.id })
  const differs =
    before !== null &&
    (before.soleLengthMm !== body.soleLengthMm ||
      before.soleType !== body.soleType ||
      before.wear !== body.wear)
  if (differs && (await fittedToOwnBoots(context, rental.id))) {
    await doubtFittings(context, { renterId: rental.renterId }, 'sole_changed')
  }
  context.touchRental(rental.id)
  return { ownBootsId: row!.id }
}

async function fittedToOwnBoots(context: CommandContext, rentalId: string): Promise<boolean> {
  const found = await context.tx.$count(
    fittings,
    and(eq(fittings.rentalId, rentalId), isNotNull(fittings.ownBootsId)),
  )
  return found > 0
}

/** Somebody else looked and says the same: the reading stands again, with both names. */
export const secondLookService: Does<typeof secondLook> = async (context, { ownBootsId }) => {
  const { shopId, personId } = context.actor
  const [seen] = await context.tx
    .select({ rentalId: ownBoots.rentalId })
    .from(ownBoots)
    .where(and(eq(ownBoots.id, ownBootsId), eq(ownBoots.shopId, shopId)))
  if (!seen) throw new Problem('items.unknown')
  await lockRental(context, seen.rentalId)
  const latest = await latestReading(context, seen.rentalId)
  if (latest?.id !== ownBootsId) throw new Problem('ownBoots.read_anew')
  if (latest.judgedBy === personId) throw new Problem('ownBoots.same_person')
  const { rentalId, description, soleLengthMm, soleType, wear, judgedBy } = latest
  const [row] = await context.tx
    .insert(ownBoots)
    .values({
      shopId,
      rentalId,
      description,
      soleLengthMm,
      soleType,
      wear,
      judgedBy,
      secondLookBy: personId,
      occurredAt: context.occurredAt,
    })
    .returning({ id: ownBoots.id })
  context.touchRental(rentalId)
  return { ownBootsId: row!.id }
}
