import type { Permission } from '#shared/permissions'
import type { ItemState } from './itemStates'

/** States that a step by hand leads to; fittings, returns, inspections and holds lead to the others. */
export const stepTargets = ['racked', 'service', 'unchecked', 'lost', 'retired', 'sold'] as const
export type StepTarget = (typeof stepTargets)[number]

export interface Step {
  to: StepTarget
  permission: Permission
  /** What is not routine needs a reason. */
  needsReason: boolean
}

const toService: Step = { to: 'service', permission: 'service.work', needsReason: true }
const away: Step[] = [
  { to: 'retired', permission: 'fleet.retire', needsReason: true },
  { to: 'sold', permission: 'fleet.retire', needsReason: true },
]
const toUnchecked: Step = { to: 'unchecked', permission: 'service.work', needsReason: false }

const steps: Partial<Record<ItemState, Step[]>> = {
  commissioning: [{ to: 'racked', permission: 'fleet.write', needsReason: false }],
  racked: [toService, { ...toUnchecked, needsReason: true }, ...away],
  out: [{ to: 'lost', permission: 'returns.record', needsReason: true }],
  service: [toUnchecked],
  withdrawn: [toService, ...away],
  lost: [{ ...toUnchecked, permission: 'returns.record' }],
}

/** The steps of the life cycle that people take by hand from here, with who may take them. */
export const stepsFrom = (state: ItemState): readonly Step[] => steps[state] ?? []

/** The step from one state to another, or null where none is taken by hand. */
export const stepBetween = (from: ItemState, to: StepTarget): Step | null =>
  stepsFrom(from).find((step) => step.to === to) ?? null
