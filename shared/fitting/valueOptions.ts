import { releaseSetting } from '#shared/release/releaseSetting'
import type { FittingFacts } from '#shared/schemas/fittingFacts'
import { releaseInputOf } from './computeFitting'
import {
  decidableRows,
  isChildForValues,
  outcomeRowsAway,
  secondNameAboveRows,
  type DecidedRows,
} from './decidedValue'
import { unitTargetsOf } from './unitTargets'

export interface ValueOption {
  rows: DecidedRows
  /** Null where the table has no value so many rows away. */
  value: number | null
  row: string | null
  secondName: boolean
  /** Why it cannot be decided; null where it can. */
  refused: 'no_value' | 'not_for_children' | 'outside_scale' | null
}

/**
 * The values that a head technician may decide instead of the computed one: up to two rows either way, inside the
 * scale of every unit, never upward for a child. Empty while there is no computed value to count from.
 */
export function valueOptions(facts: FittingFacts): ValueOption[] {
  const input = releaseInputOf(facts)
  const { skiPair } = facts
  if (!input || !skiPair) return []
  const computed = releaseSetting({ ...input, request: 0 })
  if (!computed.ok) return []
  return decidableRows.map((rows) => {
    const outcome = outcomeRowsAway(computed, rows)
    const secondName = rows > secondNameAboveRows
    if (!outcome) return { rows, value: null, row: null, secondName, refused: 'no_value' }
    const { value, row } = outcome
    const inScale = unitTargetsOf(skiPair, value).every(({ target }) => target.ok)
    const refused =
      rows > 0 && isChildForValues(input) ? 'not_for_children' : inScale ? null : 'outside_scale'
    return { rows, value, row, secondName, refused }
  })
}
