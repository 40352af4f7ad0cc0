import { and, asc, eq } from 'drizzle-orm'
import type { bootsFor, suggestPairs, SuggestedPair } from '#shared/api/fittings'
import type { AnswerOf } from '#shared/api/define'
import { adviseMondo } from '#shared/advice/bootSize'
import { adviseSkiLength } from '#shared/advice/skiLength'
import { computeFitting, type FittingComputation } from '#shared/fitting/computeFitting'
import type { FittingFacts, SkiPairFact } from '#shared/schemas/fittingFacts'
import type { TrackModel } from '#shared/track/trackModel'
import { fittingFactsOf } from '../db/queries/fittingFacts'
import { bootsFactOf, skiPairFacts } from '../db/queries/fittingParts'
import { boots, sites } from '../db/schema/schema'
import type { Deps, Reader } from '../deps'

/** A clerk reads a screenful; the rest is found by scanning. */
const atMost = 24

type Suggestions = AnswerOf<typeof suggestPairs>

async function siteNames(db: Reader, shopId: string): Promise<Map<string, string>> {
  const rows = await db.select({ id: sites.id, name: sites.name }).from(sites).where(eq(sites.shopId, shopId))
  return new Map(rows.map(({ id, name }) => [id, name]))
}

/**
 * Free pairs that these boots could stand on, computed by the same function as a claim: this site first, then the
 * advised lengths, then the fewest notches over both skis.
 */
export async function suggestPairsFor(
  deps: Deps,
  shopId: string,
  { rentalId, bootsId }: { rentalId: string; bootsId?: string },
): Promise<Suggestions> {
  const { facts } = await fittingFactsOf(deps.db, shopId, {
    rentalId,
    skiPairId: null,
    boots: bootsId ? { id: bootsId } : 'own',
  })
  const lengthAdvice = facts.inputs ? adviseSkiLength(facts.inputs) : null
  if (!facts.boots) return { soleLengthMm: null, lengthAdvice, pairs: [], total: 0, tracks: {} }
  const names = await siteNames(deps.db, shopId)
  const racked = await skiPairFacts(deps.db, shopId, 'racked')
  const pairs = racked.flatMap((pair) => suggestionOf(facts, pair, lengthAdvice, names)).sort(byNearest)
  const listed = pairs.slice(0, atMost)
  const tracks: Record<string, TrackModel> = {}
  for (const { binding } of racked)
    if (listed.some((pair) => pair.bindingModelId === binding.id)) tracks[binding.id] = binding.track
  return { soleLengthMm: facts.boots.soleLengthMm, lengthAdvice, pairs: listed, total: pairs.length, tracks }
}

/** Stops that come from the pair; the renter's and the rental's own stand on the screen already. */
function pairFits({ stops, plan }: FittingComputation): { fits: boolean; needsDecision: boolean } {
  const ofPair = stops.filter(
    ({ reason, subject }) => subject === 'ski_pair' || reason.startsWith('sole_type'),
  )
  return {
    fits: plan?.ok === true && ofPair.every(({ kind }) => kind !== null),
    needsDecision: ofPair.length > 0,
  }
}

function suggestionOf(
  facts: FittingFacts,
  pair: SkiPairFact,
  advice: Suggestions['lengthAdvice'],
  names: Map<string, string>,
): SuggestedPair[] {
  const computed = computeFitting({ ...facts, skiPair: pair, skiPairHolder: null })
  const { fits, needsDecision } = pairFits(computed)
  if (!fits || !computed.plan?.ok) return []
  const { toe, heel, turns } = computed.plan
  const marks = ({ preset }: SkiPairFact['skis']['left']) =>
    preset ? { toe: preset.toe, heel: preset.heel } : null
  return [
    {
      id: pair.id,
      code: pair.code,
      lengthCm: pair.lengthCm,
      model: pair.model,
      binding: pair.binding.name,
      bindingModelId: pair.binding.id,
      siteId: pair.siteId,
      site: names.get(pair.siteId) ?? '',
      sameSite: pair.siteId === facts.rental.siteId,
      rackPlace: pair.rackPlace,
      target: { toe, heel, turns },
      presets: { left: marks(pair.skis.left), right: marks(pair.skis.right) },
      notches: computed.notches,
      inAdvisedLength: advice ? pair.lengthCm >= advice.minCm && pair.lengthCm <= advice.maxCm : true,
      needsDecision,
    },
  ]
}

/** False before true, so that what a clerk wants stands first. */
const first = (a: boolean, b: boolean) => Number(b) - Number(a)

function byNearest(a: SuggestedPair, b: SuggestedPair): number {
  return (
    first(a.sameSite, b.sameSite) ||
    first(a.inAdvisedLength, b.inAdvisedLength) ||
    first(!a.needsDecision, !b.needsDecision) ||
    (a.notches ?? Infinity) - (b.notches ?? Infinity) ||
    a.code.localeCompare(b.code, 'en', { numeric: true })
  )
}

/** Free boots near the renter's size: this site first, then the nearest size. */
export async function bootsForRental(
  deps: Deps,
  shopId: string,
  { rentalId, mondo: askedMondo }: { rentalId: string; mondo?: number },
): Promise<AnswerOf<typeof bootsFor>> {
  const { rental } = await fittingFactsOf(deps.db, shopId, { rentalId, skiPairId: null, boots: null })
  const adviceMondo = askedMondo ?? adviseMondo(rental.shoe)
  // Without a size every pair in the shop would be on the list.
  if (adviceMondo === null) return { adviceMondo, boots: [], total: 0 }
  const names = await siteNames(deps.db, shopId)
  const rows = await deps.db
    .select()
    .from(boots)
    .where(and(eq(boots.shopId, shopId), eq(boots.state, 'racked')))
    .orderBy(asc(boots.mondo), asc(boots.code))
  const near = rows
    .map((row) => {
      const { id, code, model, siteId, rackPlace, soleLengthMm, soleType, mondo } = bootsFactOf(row)
      const sameSite = siteId === rental.siteId
      const site = names.get(siteId) ?? ''
      return { id, code, model, siteId, rackPlace, soleLengthMm, soleType, mondo, site, sameSite }
    })
    .filter(({ mondo }) => Math.abs(mondo - adviceMondo) <= 10)
    .sort(
      (a, b) =>
        first(a.sameSite, b.sameSite) || Math.abs(a.mondo - adviceMondo) - Math.abs(b.mondo - adviceMondo),
    )
  return { adviceMondo, boots: near.slice(0, atMost), total: near.length }
}
