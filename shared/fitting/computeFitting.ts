import { releaseSetting } from '#shared/release/releaseSetting'
import type { ReleaseInput } from '#shared/release/releaseInput'
import type { ReleaseResult } from '#shared/release/releaseResult'
import type { Side } from '#shared/schemas/common'
import type { DecisionFact, DecisionKind, FittingFacts, SkiPairFact } from '#shared/schemas/fittingFacts'
import type { ReleaseOutcome, Targets } from '#shared/schemas/fittings'
import { movesBetween, notchDistance } from '#shared/track/moves'
import { trackPlan, type Moves, type TrackPlan, type TrackTarget } from '#shared/track/trackPlan'
import { isChildForValues, outcomeOf, outcomeRowsAway, sidewaysOutcome } from './decidedValue'
import { fittingStops, type Stop } from './stops'
import { targetsFrom, unitTargetsOf } from './unitTargets'
import { fittingWarnings, type Warning } from './warnings'

export type MissingPart = 'inputs' | 'boots' | 'ski_pair'

/** A fitting as far as it can be computed from what is known. */
export interface FittingComputation {
  /** What has to be given or scanned before it can be judged. */
  missing: MissingPart[]
  /** The table's answer with its steps: with the renter's request, without it where a decision counts from there. */
  release: ReleaseResult | null
  /** The value that will be set and what led to it, without body values; null while there is none. */
  outcome: ReleaseOutcome | null
  plan: TrackPlan | null
  /** From each ski's preset to the plan; null where the preset is unknown or there is no plan. */
  moves: Record<Side, Moves | null>
  /** Notches over both skis, toe and heel; null where a preset is unknown or there is no plan. */
  notches: number | null
  targets: Targets | null
  stops: Stop[]
  warnings: Warning[]
  /** The decisions that this computation rests on. */
  decisions: DecisionFact[]
  /** Nothing is missing and nothing stops it. */
  ready: boolean
}

/**
 * Computes a fitting from what is known of renter, boots, pair and decisions. The counter's screen and the server
 * call this same function: the screen to show, the server to decide and store. Values in indicator units, lengths
 * in mm, positions in notches.
 */
export function computeFitting(facts: FittingFacts): FittingComputation {
  const { inputs, boots, skiPair } = facts
  const applying = decisionsAbout(facts)
  const { release, outcome, used, outdated } = valueOf(facts, applying)
  const plan =
    boots && skiPair
      ? trackPlan(skiPair.binding.track, boots.soleLengthMm, { offsetMm: skiPair.offsetMm })
      : null
  const unitTargets = skiPair && outcome ? unitTargetsOf(skiPair, outcome.value) : []
  const found = { facts, release, plan, unitTargets }
  // A decision about a value counts only while it is the value that would be set.
  const counting = applying.filter((each) => each.kind !== 'sideways_value' || used.includes(each))
  const stops = fittingStops({ ...found, decisions: counting })
  const lifted = fittingStops({ ...found, decisions: [] })
    .filter((stop) => !stops.some((left) => left.reason === stop.reason))
    .flatMap((stop) => counting.find((decision) => decision.kind === stop.kind) ?? [])
  const missing: MissingPart[] = [
    ...(inputs ? [] : (['inputs'] as const)),
    ...(boots ? [] : (['boots'] as const)),
    ...(skiPair ? [] : (['ski_pair'] as const)),
  ]
  const target = plan?.ok ? plan : null
  const targets = unitTargets.length > 0 ? targetsFrom(unitTargets) : null
  return {
    missing,
    release,
    outcome,
    plan,
    moves: { left: movesOn(skiPair, 'left', target), right: movesOn(skiPair, 'right', target) },
    notches: notchesOf(skiPair, target),
    targets,
    stops,
    warnings: [
      ...fittingWarnings(facts, outcome, unitTargets),
      ...(outdated ? [{ reason: 'decision_outdated' } as const] : []),
    ],
    decisions: [...new Set([...used, ...lifted])],
    ready: missing.length === 0 && stops.length === 0 && target !== null && targets !== null,
  }
}

/** What the table is read with; null until renter and boots are known. */
export function releaseInputOf({ inputs, boots, edition }: FittingFacts): ReleaseInput | null {
  if (!inputs || !boots) return null
  const { mass, height, age, skierType, request } = inputs
  return { mass, height, age, skierType, soleLengthMm: boots.soleLengthMm, edition, request }
}

/**
 * The latest decision of each kind about exactly these boots on this pair. One about a value was made from the
 * renter's data as they were: with newer data it no longer counts.
 */
function decisionsAbout({ inputs, boots, skiPair, decisions }: FittingFacts): DecisionFact[] {
  if (!boots || !skiPair) return []
  const latest = new Map<DecisionKind, DecisionFact>()
  for (const decision of decisions) {
    if (decision.skiPairId !== skiPair.id || decision.bootsId !== boots.id) continue
    const aboutValue = decision.kind === 'value_override' || decision.kind === 'sideways_value'
    if (aboutValue && (!inputs || Date.parse(decision.at) < Date.parse(inputs.at))) continue
    const before = latest.get(decision.kind)
    if (!before || Date.parse(before.at) <= Date.parse(decision.at)) latest.set(decision.kind, decision)
  }
  return [...latest.values()]
}

interface DecidedValue {
  release: ReleaseResult | null
  outcome: ReleaseOutcome | null
  used: DecisionFact[]
  outdated: boolean
}

function valueOf(facts: FittingFacts, decisions: readonly DecisionFact[]): DecidedValue {
  const input = releaseInputOf(facts)
  if (!input) return { release: null, outcome: null, used: [], outdated: false }
  const decided = decisions.find(({ kind, rows }) => kind === 'value_override' && rows !== null && rows !== 0)
  const otherwise = decided ? decidedValue(input, decided) : null
  if (otherwise) return otherwise
  const outdated = decided !== undefined
  const release = releaseSetting(input)
  if (release.ok) return { release, outcome: outcomeOf(release), used: [], outdated }
  const sideways = decisions.find(({ kind }) => kind === 'sideways_value')
  const taken = sidewaysOutcome(release)
  if (!sideways || !taken) return { release, outcome: null, used: [], outdated }
  if (sideways.value !== taken.value) return { release, outcome: null, used: [], outdated: true }
  return { release, outcome: taken, used: [sideways], outdated }
}

/** A head technician's value, counted from the row without any request; null where it no longer fits the table. */
function decidedValue(input: ReleaseInput, decided: DecisionFact): DecidedValue | null {
  const rows = decided.rows ?? 0
  if (rows > 0 && isChildForValues(input)) return null
  const release = releaseSetting({ ...input, request: 0 })
  const outcome = release.ok ? outcomeRowsAway(release, rows) : null
  if (!outcome || outcome.value !== decided.value) return null
  return { release, outcome, used: [decided], outdated: false }
}

function movesOn(pair: SkiPairFact | null, side: Side, target: TrackTarget | null): Moves | null {
  const preset = pair?.skis[side].preset
  return preset && target ? movesBetween(preset, target) : null
}

function notchesOf(pair: SkiPairFact | null, target: TrackTarget | null): number | null {
  if (!pair || !target) return null
  const left = notchDistance(pair.skis.left.preset, target)
  const right = notchDistance(pair.skis.right.preset, target)
  return left === null || right === null ? null : left + right
}
