import type { InvalidInput } from '#shared/calc/invalidInput'
import type { Height, Mass } from '#shared/units/bodySchemas'
import type { Request } from './releaseInput'
import type { SkierType } from './rules'
import type { Band, EditionName, RowCode } from './selectionTable'

/**
 * One step of a computation, with the numbers that explain it. Language-neutral: the client words them.
 * Shifts are in rows, negative is up, to a lower value.
 */
export type ReleaseStep =
  | { rule: 'mass'; row: RowCode | null; given: Mass; unit: 'kg' | 'lb'; whole: number; band: Band }
  | { rule: 'light_skier'; skierType: SkierType; unit: 'kg' | 'lb'; upTo: number }
  | { rule: 'request_of_child'; age: number; ageUpTo: number; unit: 'kg' | 'lb'; upTo: number }
  | { rule: 'height'; row: RowCode; given: Height; unit: 'cm' | 'in'; whole: number; band: Band }
  | {
      rule: 'nearer_top'
      row: RowCode
      massRow: RowCode
      heightRow: RowCode
      decidedBy: 'mass' | 'height' | 'both'
    }
  | { rule: 'type'; skierType: SkierType; shift: number }
  | { rule: 'age'; age: number; because: 'child' | 'senior' | 'neither'; shift: number }
  | { rule: 'request'; request: Request; shift: number }
  | { rule: 'clamp'; row: RowCode; from: RowCode; shift: number; clampedAt: 'A' | 'P' | null }
  | {
      rule: 'column'
      row: RowCode
      edition: EditionName
      given: number
      soleLengthMm: number
      column: number
      band: Band
    }
  | { rule: 'cell'; row: RowCode; column: number; value: number | null }
  | { rule: 'sideways'; row: RowCode; fromColumn: number; column: number; band: Band; value: number }

export type ReleaseSetting = {
  ok: true
  row: RowCode
  /** Indicator value for toe and heel, before a unit's own correction. */
  value: number
  /** The sole is shorter than the row has values for: the torques are a reference that this value does not reach. */
  sideways: boolean
  twistNm: number
  forwardLeanNm: number
  steps: ReleaseStep[]
}

export type ReleaseRefusal =
  | { ok: false; reason: 'mass_below_table'; steps: ReleaseStep[] }
  | { ok: false; reason: 'type_not_allowed_under_22_kg'; steps: ReleaseStep[] }
  | { ok: false; reason: 'request_not_allowed'; steps: ReleaseStep[] }
  | { ok: false; reason: 'row_without_values'; row: RowCode; steps: ReleaseStep[] }
  | { ok: false; reason: 'sole_longer_than_row'; row: RowCode; sidewaysValue: number; steps: ReleaseStep[] }

export type ReleaseResult = ReleaseSetting | ReleaseRefusal | InvalidInput
export type ReleaseRefusalReason = ReleaseRefusal['reason'] | 'invalid_input'
