import { invalidInput } from '#shared/calc/invalidInput'
import { columnOf, heightBand, massBand } from './bands'
import type { ReleaseInput, Request } from './releaseInput'
import type { ReleaseResult, ReleaseStep } from './releaseResult'
import { isLight } from './isLight'
import { ageRule, lightSkier, typeShift, type SkierType } from './rules'
import { editions, selectionRows, type EditionName, type SelectionRow } from './selectionTable'
import { malformedField } from './wellFormed'

const lastRow = selectionRows.length - 1

/** Something that the table has by its construction; its tests hold it to that. */
function present<T>(part: T | null | undefined): T {
  if (part === null || part === undefined) throw new RangeError('the selection table is incomplete')
  return part
}

const rowAt = (index: number): SelectionRow => present(selectionRows[index])

/**
 * The initial release value for a renter, with every step that led to it. Masses and heights in the unit given,
 * sole length in mm (rounded up), value in indicator units, torques in N·m. What the table cannot answer is
 * `{ ok: false, reason }` with the steps as far as they went. Sources: selectionTable and ruleStandings.
 *
 * A trained technician sets and verifies it with the binding maker's instructions, the standard in force and
 * local law; no conformity with any standard is claimed.
 */
export function releaseSetting(input: ReleaseInput): ReleaseResult {
  const malformed = malformedField(input)
  if (malformed) return invalidInput([malformed], 'outside what the field may hold')

  const { age, skierType, request = 0, edition = 'eight-column' } = input
  const steps: ReleaseStep[] = []

  const mass = massBand(input.mass)
  const massRow = mass.index === null ? null : rowAt(mass.index).code
  steps.push({
    rule: 'mass',
    row: massRow,
    given: input.mass,
    unit: mass.unit,
    whole: mass.whole,
    band: mass.band,
  })
  if (mass.index === null || massRow === null) return { ok: false, reason: 'mass_below_table', steps }

  const upTo = lightSkier[mass.unit]
  const light = isLight(input.mass)
  if (light && (skierType === 'III' || skierType === 'III+')) {
    steps.push({ rule: 'light_skier', skierType, unit: mass.unit, upTo })
    return { ok: false, reason: 'type_not_allowed_under_22_kg', steps }
  }
  if (request > 0 && (light || age <= ageRule.childUpTo)) {
    steps.push({ rule: 'request_of_child', age, ageUpTo: ageRule.childUpTo, unit: mass.unit, upTo })
    return { ok: false, reason: 'request_not_allowed', steps }
  }

  const height = heightBand(input.height)
  const heightIndex = present(height.index)
  const heightRow = rowAt(heightIndex).code
  steps.push({
    rule: 'height',
    row: heightRow,
    given: input.height,
    unit: height.unit,
    whole: height.whole,
    band: height.band,
  })

  const startIndex = Math.min(mass.index, heightIndex)
  const from = rowAt(startIndex).code
  const decidedBy = mass.index === heightIndex ? 'both' : startIndex === mass.index ? 'mass' : 'height'
  steps.push({ rule: 'nearer_top', row: from, massRow, heightRow, decidedBy })

  const row = shiftedRow(startIndex, { skierType, age, request }, steps)
  return valueInRow(row, edition, input.soleLengthMm, steps)
}

/** Type, age and request are added together and clamped once: above the table is A, below it is P. */
function shiftedRow(
  startIndex: number,
  { skierType, age, request }: { skierType: SkierType; age: number; request: Request },
  steps: ReleaseStep[],
): SelectionRow {
  const because = age <= ageRule.childUpTo ? 'child' : age >= ageRule.seniorFrom ? 'senior' : 'neither'
  const ageShift = because === 'neither' ? 0 : ageRule.shift
  const shift = typeShift[skierType] + ageShift + request
  const wanted = startIndex + shift
  const row = rowAt(Math.min(Math.max(wanted, 0), lastRow))
  steps.push(
    { rule: 'type', skierType, shift: typeShift[skierType] },
    { rule: 'age', age, because, shift: ageShift },
    { rule: 'request', request, shift: request },
    {
      rule: 'clamp',
      row: row.code,
      from: rowAt(startIndex).code,
      shift,
      clampedAt: wanted < 0 ? 'A' : wanted > lastRow ? 'P' : null,
    },
  )
  return row
}

/** The cell of a row. Left of the row's values: the nearest to the right. Right of them: refused. */
function valueInRow(
  row: SelectionRow,
  name: EditionName,
  given: number,
  steps: ReleaseStep[],
): ReleaseResult {
  const { columns, values } = editions[name]
  const cells = values[row.code]
  const soleLengthMm = Math.ceil(given)
  const column = columnOf(columns, soleLengthMm)
  const band = present(columns[column])
  steps.push({ rule: 'column', row: row.code, edition: name, given, soleLengthMm, column, band })

  const value = cells[column] ?? null
  steps.push({ rule: 'cell', row: row.code, column, value })
  if (value !== null) return setting(row, value, false, steps)

  const first = cells.findIndex((cell) => cell !== null)
  if (first < 0) return { ok: false, reason: 'row_without_values', row: row.code, steps }
  const toTheRight = column < first
  const nearest = toTheRight ? first : cells.findLastIndex((cell) => cell !== null)
  const nearestValue = present(cells[nearest])
  steps.push({
    rule: 'sideways',
    row: row.code,
    fromColumn: column,
    column: nearest,
    band: present(columns[nearest]),
    value: nearestValue,
  })
  if (toTheRight) return setting(row, nearestValue, true, steps)
  return { ok: false, reason: 'sole_longer_than_row', row: row.code, sidewaysValue: nearestValue, steps }
}

function setting(row: SelectionRow, value: number, sideways: boolean, steps: ReleaseStep[]): ReleaseResult {
  const { code, twistNm, forwardLeanNm } = row
  return { ok: true, row: code, value, sideways, twistNm, forwardLeanNm, steps }
}
