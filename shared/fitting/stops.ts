import { scaleFit } from '#shared/compatibility/scaleFit'
import { soleFit } from '#shared/compatibility/soleFit'
import { rentalDays } from '#shared/dates/days'
import type { ReleaseRefusalReason, ReleaseResult } from '#shared/release/releaseResult'
import { individualTestFromDays } from '#shared/renters/period'
import type {
  BootsFact,
  DecisionFact,
  DecisionKind,
  FittingFacts,
  HolderFact,
  SkiPairFact,
} from '#shared/schemas/fittingFacts'
import type { TrackPlan, TrackRefusalReason } from '#shared/track/trackPlan'
import type { UnitTarget } from './unitTargets'

/** Who can take a stop away: nobody (other things are needed), a head technician, or a second look. */
export type Decider = 'nobody' | 'head_technician' | 'second_look'

export type StopReason =
  | 'rental_not_open'
  | 'item_state'
  | 'item_taken'
  | 'binding_model_not_approved'
  | 'binding_model_blocked'
  | 'sole_type_refused'
  | 'sole_type_unknown'
  | 'own_boots_unseen'
  | 'own_boots_worn'
  | 'period_needs_test'
  | 'value_below_scale'
  | 'value_above_scale'
  | 'track_unreadable'
  | Exclude<TrackRefusalReason, 'invalid_input'>
  | Exclude<ReleaseRefusalReason, 'invalid_input'>
  | 'inputs_unreadable'

export interface Stop {
  reason: StopReason
  /** What has to change, or what is decided about. */
  subject: 'renter' | 'rental' | 'boots' | 'ski_pair'
  decides: Decider
  /** The decision that takes it away, where there is one. */
  kind: DecisionKind | null
  /** Numbers and words for the text; never body values. */
  params: Record<string, string | number>
}

const stop = (
  reason: StopReason,
  subject: Stop['subject'],
  params: Stop['params'] = {},
  decides: Decider = 'nobody',
  kind: DecisionKind | null = null,
): Stop => ({ reason, subject, decides, kind, params })

/** What has to be known of a fitting before it can be judged. */
export interface StopInput {
  facts: FittingFacts
  /** The table's answer; null until data and boots are known. */
  release: ReleaseResult | null
  plan: TrackPlan | null
  unitTargets: UnitTarget[]
  /** Decisions about exactly this renter, these boots and this pair. */
  decisions: readonly DecisionFact[]
}

/**
 * Everything that keeps this fitting from the bench, in the order in which it is best solved. A stop that somebody
 * decided is not in it. Empty: the fitting may go on.
 */
export function fittingStops({ facts, release, plan, unitTargets, decisions }: StopInput): Stop[] {
  const { boots, skiPair } = facts
  const found = [
    ...rentalStops(facts),
    ...(boots ? bootsStops(facts, boots) : []),
    ...(skiPair ? pairStops(facts, skiPair) : []),
    ...(boots && skiPair ? soleStops(boots, skiPair, plan) : []),
    ...(release ? releaseStops(release) : []),
    ...scaleStops(unitTargets),
  ]
  const decided = new Set(decisions.map((decision) => decision.kind))
  return found.filter((each) => each.kind === null || !decided.has(each.kind))
}

function rentalStops({ rental }: FittingFacts): Stop[] {
  const days = rentalDays(rental.startsOn, rental.endsOn)
  return [
    ...(rental.state === 'open' || rental.state === 'out'
      ? []
      : [stop('rental_not_open', 'rental', { state: rental.state })]),
    ...(days < individualTestFromDays
      ? []
      : [
          stop(
            'period_needs_test',
            'rental',
            { days, from: individualTestFromDays },
            'head_technician',
            'individual_test',
          ),
        ]),
  ]
}

/** An item is free, or stands with the fitting that this one replaces. */
function itemStops(
  item: { id: string; code: string; state: string },
  subject: 'boots' | 'ski_pair',
  holder: HolderFact | null,
  { openFitting }: FittingFacts,
): Stop[] {
  if (item.state === 'racked') return []
  const taken = item.state === 'claimed' || item.state === 'prepared'
  const own = openFitting?.skiPairId === item.id || openFitting?.bootsId === item.id
  if (taken && own) return []
  if (taken && holder) {
    return [stop('item_taken', subject, { code: item.code, by: holder.by, since: holder.since })]
  }
  return [stop('item_state', subject, { code: item.code, state: item.state })]
}

function bootsStops(facts: FittingFacts, boots: BootsFact): Stop[] {
  if (boots.kind === 'shop') return itemStops(boots, 'boots', facts.bootsHolder, facts)
  const seen = boots.judgedByHead || boots.secondLookBy !== null
  return [
    ...(boots.wear === 'worn'
      ? [stop('own_boots_worn', 'boots', {}, 'head_technician', 'own_boots')]
      : seen
        ? []
        : [stop('own_boots_unseen', 'boots', { by: boots.judgedBy }, 'second_look', 'own_boots')]),
  ]
}

function pairStops(facts: FittingFacts, pair: SkiPairFact): Stop[] {
  const { binding } = pair
  const about = { code: pair.code, model: binding.name }
  return [
    ...itemStops(pair, 'ski_pair', facts.skiPairHolder, facts),
    ...(binding.blockedReason === null
      ? []
      : [stop('binding_model_blocked', 'ski_pair', { ...about, why: binding.blockedReason })]),
    ...(binding.approved ? [] : [stop('binding_model_not_approved', 'ski_pair', about, 'head_technician')]),
  ]
}

function soleStops(boots: BootsFact, pair: SkiPairFact, plan: TrackPlan | null): Stop[] {
  const { accepts, track, name } = pair.binding
  const { soleLengthMm, soleType } = boots
  const sole = { code: pair.code, model: name, soleType, accepts: accepts.join(', ') }
  const fit = soleFit(soleType, pair.binding)
  const type =
    fit === 'refused'
      ? [stop('sole_type_refused', 'boots', sole)]
      : fit === 'unknown'
        ? [stop('sole_type_unknown', 'boots', sole, 'head_technician', 'unknown_sole')]
        : []
  if (!plan || plan.ok) return type
  const { min, max } = track.soleLengthMm
  const length = { code: pair.code, model: name, soleLengthMm, min, max }
  if (plan.reason === 'invalid_input') return [...type, stop('track_unreadable', 'ski_pair', length)]
  if (plan.reason === 'off_centre') {
    return [...type, stop('off_centre', 'ski_pair', { ...length, shiftMm: plan.nearest.centreShiftMm })]
  }
  return [...type, stop(plan.reason, 'ski_pair', length)]
}

function releaseStops(release: ReleaseResult): Stop[] {
  if (release.ok) return []
  switch (release.reason) {
    case 'invalid_input':
      return [stop('inputs_unreadable', 'renter')]
    case 'sole_longer_than_row':
      return [
        stop(
          'sole_longer_than_row',
          'boots',
          { row: release.row, value: release.sidewaysValue },
          'head_technician',
          'sideways_value',
        ),
      ]
    case 'row_without_values':
      return [stop('row_without_values', 'renter', { row: release.row })]
    default:
      return [stop(release.reason, 'renter')]
  }
}

/** One stop a side of the scale, naming the worst unit and how many units are beyond it. */
function scaleStops(unitTargets: UnitTarget[]): Stop[] {
  const beyond = unitTargets.filter(({ target }) => !target.ok)
  return (['below_scale', 'above_scale'] as const).flatMap((reason) => {
    const these = beyond.filter(({ target }) => !target.ok && target.reason === reason)
    const worst = these[0]
    if (!worst || worst.target.ok) return []
    const { min, max } = worst.target.scale
    return [stop(`value_${reason}`, 'ski_pair', { value: worst.target.value, min, max, units: these.length })]
  })
}

/** Whether a value stands in a third of the scale where a unit is less well used. */
export function outerThird(value: number, scale: { min: number; max: number }): 'lower' | 'upper' | null {
  const { third } = scaleFit(value, scale)
  return third === 'lower' || third === 'upper' ? third : null
}
