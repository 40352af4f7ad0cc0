import { isLight } from '#shared/release/isLight'
import type { ReleaseInput } from '#shared/release/releaseInput'
import type { ReleaseResult, ReleaseSetting } from '#shared/release/releaseResult'
import { ageRule } from '#shared/release/rules'
import { editions, selectionRows } from '#shared/release/selectionTable'
import type { ReleaseOutcome } from '#shared/schemas/fittings'
import { rowStepsOf } from './rowSteps'

/** More rows up than this need a second name. */
export const secondNameAboveRows = 1

/** A head technician's value stays within two rows of the computed one; positive is a higher value. */
export const decidableRows = [-2, -1, 1, 2] as const
export type DecidedRows = (typeof decidableRows)[number]

/** Somebody for whom no value above the computed one may be decided or asked for: 9 and under, or up to 21 kg. */
export function isChildForValues({ age, mass }: Pick<ReleaseInput, 'age' | 'mass'>): boolean {
  return age <= ageRule.childUpTo || isLight(mass)
}

/** A table answer as it may be stored: without the body values. */
export function outcomeOf({
  row,
  value,
  sideways,
  twistNm,
  forwardLeanNm,
  steps,
}: ReleaseSetting): ReleaseOutcome {
  return { row, value, sideways, twistNm, forwardLeanNm, rowSteps: rowStepsOf(steps) }
}

/**
 * What the same sole gets so many rows from the computed row. Null where the table has no such row or the row has
 * no value there: beyond A, from P on, or a sole longer than the row has.
 */
export function outcomeRowsAway(computed: ReleaseSetting, rows: number): ReleaseOutcome | null {
  const used = computed.steps.find((step) => step.rule === 'column')
  const index = selectionRows.findIndex((row) => row.code === computed.row) + rows
  const row = selectionRows[index]
  if (!used || !row) return null
  const cells = editions[used.edition].values[row.code]
  const cell = cells[used.column] ?? null
  const first = cells.findIndex((each) => each !== null)
  const sideways = cell === null && used.column < first
  const value = cell ?? (sideways ? (cells[first] ?? null) : null)
  if (value === null) return null
  return {
    row: row.code,
    value,
    sideways,
    twistNm: row.twistNm,
    forwardLeanNm: row.forwardLeanNm,
    rowSteps: [...rowStepsOf(computed.steps), { rule: 'decision', rows }],
  }
}

/** The nearest column's value, which a head technician decided to take for a sole longer than the row has. */
export function sidewaysOutcome(refused: ReleaseResult): ReleaseOutcome | null {
  if (refused.ok || refused.reason !== 'sole_longer_than_row') return null
  const row = selectionRows.find((each) => each.code === refused.row)
  if (!row) return null
  const { twistNm, forwardLeanNm } = row
  return {
    row: row.code,
    value: refused.sidewaysValue,
    sideways: true,
    twistNm,
    forwardLeanNm,
    rowSteps: rowStepsOf(refused.steps),
  }
}
