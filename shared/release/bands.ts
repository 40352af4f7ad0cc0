import type { Height, Mass } from '#shared/units/bodySchemas'
import { wholeHeight, wholeMass } from '#shared/units/wholeUnits'
import { selectionRows, type Band } from './selectionTable'

/** Where a body value stands in the table: row index from 0 (A), or null when it is below the table. */
export type BandHit<Unit> = { unit: Unit; whole: number; band: Band; index: number | null }

const holds = (band: Band, whole: number) =>
  (band.min === null || whole >= band.min) && (band.max === null || whole <= band.max)

function hit<Unit>(unit: Unit, whole: number, bands: readonly (Band | null)[]): BandHit<Unit> {
  const index = bands.findIndex((band) => band !== null && holds(band, whole))
  const band = bands[index]
  if (band) return { unit, whole, band, index }
  const first = bands.find((each) => each !== null)
  return { unit, whole, band: { min: null, max: (first?.min ?? 0) - 1 }, index: null }
}

const massKgBands = selectionRows.map((row) => row.massKg)
const massLbBands = selectionRows.map((row) => row.massLb)
const heightCmBands = selectionRows.map((row) => row.heightCm)
const heightInBands = selectionRows.map((row) => row.heightIn)

/** Row of a mass, in the unit given. Below the table (under 10 kg, 22 lb): index null. */
export function massBand(mass: Mass): BandHit<'kg' | 'lb'> {
  const { unit, whole } = wholeMass(mass)
  return hit(unit, whole, unit === 'kg' ? massKgBands : massLbBands)
}

/** Row of a height, in the unit given. Every height has one: 148 cm (4'10") and less is row H. */
export function heightBand(height: Height): BandHit<'cm' | 'in'> {
  const { unit, whole } = wholeHeight(height)
  return hit(unit, whole, unit === 'cm' ? heightCmBands : heightInBands)
}

/** Column of a sole length in whole mm. */
export function columnOf(columns: readonly Band[], soleLengthMm: number): number {
  return columns.findIndex((column) => holds(column, soleLengthMm))
}
