import type { Side, Unit } from '#shared/schemas/common'
import type { SkiPairFact } from '#shared/schemas/fittingFacts'
import type { Targets } from '#shared/schemas/fittings'
import { targetIndicator, type TargetIndicator } from '#shared/track/targetIndicator'

export const sides = ['left', 'right'] as const satisfies readonly Side[]
export const units = ['toe', 'heel'] as const satisfies readonly Unit[]

export interface UnitTarget {
  side: Side
  unit: Unit
  correction: number
  target: TargetIndicator
}

/** What each of the four units shall show for a release value, with its own correction. */
export function unitTargetsOf(pair: SkiPairFact, value: number): UnitTarget[] {
  return sides.flatMap((side) =>
    units.map((unit) => {
      const ski = pair.skis[side]
      const correction = unit === 'toe' ? ski.toeCorrection : ski.heelCorrection
      return { side, unit, correction, target: targetIndicator(pair.binding.track, value, correction) }
    }),
  )
}

/** The four targets as they are stored; null while one of them is off its scale. */
export function targetsFrom(unitTargets: readonly UnitTarget[]): Targets | null {
  if (unitTargets.some(({ target }) => !target.ok)) return null
  const valueOf = (side: Side, unit: Unit) =>
    unitTargets.find((each) => each.side === side && each.unit === unit)?.target.value
  const [leftToe, leftHeel] = [valueOf('left', 'toe'), valueOf('left', 'heel')]
  const [rightToe, rightHeel] = [valueOf('right', 'toe'), valueOf('right', 'heel')]
  if (leftToe === undefined || leftHeel === undefined || rightToe === undefined || rightHeel === undefined)
    return null
  return { left: { toe: leftToe, heel: leftHeel }, right: { toe: rightToe, heel: rightHeel } }
}
