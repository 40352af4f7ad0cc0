import { brakeFit } from '#shared/compatibility/brakeFit'
import { nearRowLimit, type NearRowLimit } from '#shared/release/nearRowLimit'
import { plausibleForAge, type AgeWarning } from '#shared/release/plausibleForAge'
import type { Side, Unit } from '#shared/schemas/common'
import type { FittingFacts, FittingInputsFact } from '#shared/schemas/fittingFacts'
import type { ReleaseOutcome } from '#shared/schemas/fittings'
import { outerThird } from './stops'
import { sides, type UnitTarget } from './unitTargets'

/** What a clerk should know and nobody has to decide. */
export type Warning =
  | { reason: 'measure'; near: NearRowLimit }
  | { reason: 'unusual_for_age'; age: AgeWarning }
  | { reason: 'sideways' }
  | { reason: 'outer_third'; third: 'lower' | 'upper'; min: number; max: number }
  | { reason: 'correction'; side: Side; unit: Unit; correction: number; target: number }
  | { reason: 'brake'; fit: 'narrower_than_ski' | 'wider_than_usual'; brakeMm: number; waistMm: number }
  | { reason: 'other_site'; subject: 'boots' | 'ski_pair'; code: string }
  | { reason: 'preset_unknown'; side: Side }
  | { reason: 'decision_outdated' }

export function fittingWarnings(
  facts: FittingFacts,
  outcome: ReleaseOutcome | null,
  unitTargets: readonly UnitTarget[],
): Warning[] {
  return [
    ...(facts.inputs ? renterWarnings(facts.inputs, facts.near) : []),
    ...(outcome?.sideways ? [{ reason: 'sideways' } as const] : []),
    ...unitWarnings(facts, outcome, unitTargets),
    ...placeWarnings(facts),
  ]
}

/** Near a row border counts for a declared value only: a measured one was measured. */
function renterWarnings(inputs: FittingInputsFact, near: FittingFacts['near']): Warning[] {
  const declared = { mass: inputs.massSource === 'declared', height: inputs.heightSource === 'declared' }
  return [
    ...nearRowLimit(inputs, near)
      .filter((each) => declared[each.what])
      .map((each) => ({ reason: 'measure', near: each }) as const),
    ...plausibleForAge(inputs).map((age) => ({ reason: 'unusual_for_age', age }) as const),
  ]
}

function unitWarnings(
  { skiPair }: FittingFacts,
  outcome: ReleaseOutcome | null,
  unitTargets: readonly UnitTarget[],
): Warning[] {
  if (!skiPair) return []
  const { track, brakeMm } = skiPair.binding
  const third = outcome ? outerThird(outcome.value, track.releaseValue) : null
  const fit = brakeFit(brakeMm, skiPair.waistMm)
  return [
    ...(third ? [{ reason: 'outer_third', third, ...track.releaseValue } as const] : []),
    ...unitTargets.flatMap(({ side, unit, correction, target }) =>
      correction === 0
        ? []
        : [{ reason: 'correction', side, unit, correction, target: target.value } as const],
    ),
    ...(brakeMm !== null && (fit === 'narrower_than_ski' || fit === 'wider_than_usual')
      ? [{ reason: 'brake', fit, brakeMm, waistMm: skiPair.waistMm } as const]
      : []),
    ...sides.flatMap((side) =>
      skiPair.skis[side].preset ? [] : [{ reason: 'preset_unknown', side } as const],
    ),
  ]
}

function placeWarnings({ rental, boots, skiPair }: FittingFacts): Warning[] {
  return [
    ...(boots?.kind === 'shop' && boots.siteId !== rental.siteId
      ? [{ reason: 'other_site', subject: 'boots', code: boots.code } as const]
      : []),
    ...(skiPair && skiPair.siteId !== rental.siteId
      ? [{ reason: 'other_site', subject: 'ski_pair', code: skiPair.code } as const]
      : []),
  ]
}
