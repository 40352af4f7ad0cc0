import type { Height, Mass } from '#shared/units/bodySchemas'
import { inOtherSystem } from '#shared/units/convert'
import { heightBand, massBand } from './bands'
import { selectionRows, type Band, type RowCode } from './selectionTable'

/** How near a declared value may come to a row border before the shop measures. Invented; a shop may set its own. */
export const nearRowDefaults = { massKg: 2, heightCm: 3 } as const
export type NearRowLimits = { massKg: number; heightCm: number }

export type NearRowLimit = {
  what: 'mass' | 'height'
  /** Near a border of its own unit, or in another row when converted to the other system of units. */
  why: 'near_border' | 'other_units'
  /** Row as given and row on the other side; null is below the table. */
  row: RowCode | null
  otherRow: RowCode | null
  /** First whole unit of the lower row, in kg, lb, cm or inches. */
  border: number | null
  unit: 'kg' | 'lb' | 'cm' | 'in'
  /** Whether the renter's starting row (the nearer to the top of mass and height) would be another one. */
  changesRow: boolean
}

const lbPerKg = 1 / 0.45359237
const inPerCm = 1 / 2.54
const belowTable = -1
const codeAt = (index: number): RowCode | null => selectionRows[index]?.code ?? null

/** Values at which a row begins; a value below the border belongs to the row above. */
function borders(bands: readonly (Band | null)[]): { at: number; index: number }[] {
  return bands.flatMap((band, index) => (band?.min == null ? [] : [{ at: band.min, index }]))
}

const bordersIn = {
  kg: borders(selectionRows.map((row) => row.massKg)),
  lb: borders(selectionRows.map((row) => row.massLb)),
  cm: borders(selectionRows.map((row) => row.heightCm)),
  in: borders(selectionRows.map((row) => row.heightIn)),
}

type Side = Omit<NearRowLimit, 'changesRow'> & { otherIndex: number }

function nearBorders(
  what: 'mass' | 'height',
  unit: keyof typeof bordersIn,
  value: number,
  index: number,
  limit: number,
): Side[] {
  return bordersIn[unit]
    .filter((border) => Math.abs(value - border.at) <= limit)
    .map((border) => {
      const otherIndex = value >= border.at ? border.index - 1 : border.index
      return {
        what,
        why: 'near_border',
        row: codeAt(index),
        otherRow: codeAt(otherIndex),
        border: border.at,
        unit,
        otherIndex,
      }
    })
}

function massSides(mass: Mass, limitKg: number): Side[] {
  const { unit, index } = massBand(mass)
  const value = mass.unit === 'st-lb' ? 14 * mass.stone + mass.pounds : mass.value
  const own = index ?? belowTable
  const near = nearBorders('mass', unit, value, own, unit === 'kg' ? limitKg : limitKg * lbPerKg)
  const otherIndex = massBand(inOtherSystem(mass)).index ?? belowTable
  if (otherIndex === own) return near
  return [
    ...near,
    {
      what: 'mass',
      why: 'other_units',
      row: codeAt(own),
      otherRow: codeAt(otherIndex),
      border: null,
      unit,
      otherIndex,
    },
  ]
}

function heightSides(height: Height, limitCm: number): Side[] {
  const { unit, index } = heightBand(height)
  const value = height.unit === 'ft-in' ? 12 * height.feet + height.inches : height.value
  const own = index ?? belowTable
  const near = nearBorders('height', unit, value, own, unit === 'cm' ? limitCm : limitCm * inPerCm)
  const otherIndex = heightBand(inOtherSystem(height)).index ?? belowTable
  if (otherIndex === own) return near
  return [
    ...near,
    {
      what: 'height',
      why: 'other_units',
      row: codeAt(own),
      otherRow: codeAt(otherIndex),
      border: null,
      unit,
      otherIndex,
    },
  ]
}

/**
 * Why a declared mass or height should be measured: it stands near a row border (both ends inside the limit), or
 * kg and lb (cm and ft-in) give different rows. Empty: no reason. Limits in kg and cm, whatever unit was typed.
 */
export function nearRowLimit(
  { mass, height }: { mass: Mass; height: Height },
  limits: NearRowLimits = nearRowDefaults,
): NearRowLimit[] {
  const massIndex = massBand(mass).index ?? belowTable
  const heightIndex = heightBand(height).index ?? belowTable
  const startIndex = Math.min(massIndex, heightIndex)
  return [...massSides(mass, limits.massKg), ...heightSides(height, limits.heightCm)].map(
    ({ otherIndex, ...side }) => {
      const otherStart =
        side.what === 'mass' ? Math.min(otherIndex, heightIndex) : Math.min(massIndex, otherIndex)
      return { ...side, changesRow: otherStart !== startIndex }
    },
  )
}
