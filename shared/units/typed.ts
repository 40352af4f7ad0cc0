import { bodyLimits } from './bodyLimits'
import type { Height, Mass } from './bodySchemas'

const decimal = /^\d{1,4}(?:[.,]\d{0,6})?$/

/** A number as people type it, decimal comma or point: '70', '70,5', '70.5'. Anything else: null. */
export function parseDecimal(text: string): number | null {
  const trimmed = text.trim()
  return decimal.test(trimmed) ? Number(trimmed.replace(',', '.')) : null
}

export type TypedMass =
  { unit: 'kg' | 'lb'; value: string } | { unit: 'st-lb'; stone: string; pounds: string }
export type TypedHeight = { unit: 'cm'; value: string } | { unit: 'ft-in'; feet: string; inches: string }
export type TypedField = 'value' | 'stone' | 'pounds' | 'feet' | 'inches'

export type TypedProblem = {
  ok: false
  field: TypedField
  reason: 'empty' | 'not_a_number' | 'not_whole' | 'out_of_limits' | 'looks_like_metres'
  /** What the field may hold, in its own unit, where that helps. */
  limits?: { min: number; max: number }
}
export type ParsedMass = { ok: true; mass: Mass } | TypedProblem
export type ParsedHeight = { ok: true; height: Height } | TypedProblem

type Read = { ok: true; number: number } | TypedProblem

function read(field: TypedField, text: string, { optional = false, whole = false } = {}): Read {
  if (text.trim() === '') return optional ? { ok: true, number: 0 } : { ok: false, field, reason: 'empty' }
  const number = parseDecimal(text)
  if (number === null) return { ok: false, field, reason: 'not_a_number' }
  return whole && !Number.isInteger(number) ? { ok: false, field, reason: 'not_whole' } : { ok: true, number }
}

function within(
  field: TypedField,
  number: number,
  limits: { min: number; max: number },
): TypedProblem | null {
  return number >= limits.min && number <= limits.max
    ? null
    : { ok: false, field, reason: 'out_of_limits', limits: { min: limits.min, max: limits.max } }
}

/** What was typed for a mass, in the unit chosen. Pounds beside stone may be left empty. */
export function parseMass(typed: TypedMass): ParsedMass {
  if (typed.unit !== 'st-lb') {
    const value = read('value', typed.value)
    if (!value.ok) return value
    const limits = typed.unit === 'kg' ? bodyLimits.massKg : bodyLimits.massLb
    return (
      within('value', value.number, limits) ?? { ok: true, mass: { unit: typed.unit, value: value.number } }
    )
  }
  const stone = read('stone', typed.stone, { whole: true })
  if (!stone.ok) return stone
  const pounds = read('pounds', typed.pounds, { optional: true })
  if (!pounds.ok) return pounds
  if (pounds.number >= 14)
    return { ok: false, field: 'pounds', reason: 'out_of_limits', limits: { min: 0, max: 13 } }
  const { min, max } = bodyLimits.massLb
  const left = { min: min - 14 * stone.number, max: max - 14 * stone.number }
  if (within('pounds', pounds.number, left)) {
    return {
      ok: false,
      field: 'stone',
      reason: 'out_of_limits',
      limits: { min: 0, max: Math.floor(max / 14) },
    }
  }
  return { ok: true, mass: { unit: 'st-lb', stone: stone.number, pounds: pounds.number } }
}

/** What was typed for a height, in the unit chosen. Inches may be left empty; 1.75 in the cm field is named. */
export function parseHeight(typed: TypedHeight): ParsedHeight {
  if (typed.unit === 'cm') {
    const value = read('value', typed.value)
    if (!value.ok) return value
    const problem = within('value', value.number, bodyLimits.heightCm)
    if (!problem) return { ok: true, height: { unit: 'cm', value: value.number } }
    const inMetres = within('value', 100 * value.number, bodyLimits.heightCm) === null
    return inMetres ? { ...problem, reason: 'looks_like_metres' } : problem
  }
  const feet = read('feet', typed.feet, { whole: true })
  if (!feet.ok) return feet
  const inches = read('inches', typed.inches, { optional: true })
  if (!inches.ok) return inches
  const problem = within('feet', feet.number, bodyLimits.heightFeet)
  if (problem) return problem
  if (inches.number >= 12)
    return { ok: false, field: 'inches', reason: 'out_of_limits', limits: { min: 0, max: 11 } }
  return { ok: true, height: { unit: 'ft-in', feet: feet.number, inches: inches.number } }
}

export type DecimalMark = '.' | ','

/** A number for reading, with the language's decimal mark and no grouping. */
export function printDecimal(value: number, mark: DecimalMark = '.'): string {
  return String(value).replace('.', mark)
}

/** '70.5 kg', '154 lb', '11 st 3 lb'. The symbols are the same in every language. */
export function printMass(mass: Mass, mark: DecimalMark = '.'): string {
  if (mass.unit === 'st-lb') return `${mass.stone} st ${printDecimal(mass.pounds, mark)} lb`
  return `${printDecimal(mass.value, mark)} ${mass.unit}`
}

/** '175 cm', '5 ft 9 in'. */
export function printHeight(height: Height, mark: DecimalMark = '.'): string {
  if (height.unit === 'ft-in') return `${height.feet} ft ${printDecimal(height.inches, mark)} in`
  return `${printDecimal(height.value, mark)} cm`
}

/** A mass as the texts of its own fields, for showing a draft again. */
export function typedMass(mass: Mass, mark: DecimalMark = '.'): TypedMass {
  if (mass.unit === 'st-lb') {
    return { unit: mass.unit, stone: String(mass.stone), pounds: printDecimal(mass.pounds, mark) }
  }
  return { unit: mass.unit, value: printDecimal(mass.value, mark) }
}

/** A height as the texts of its own fields. */
export function typedHeight(height: Height, mark: DecimalMark = '.'): TypedHeight {
  if (height.unit === 'ft-in') {
    return { unit: height.unit, feet: String(height.feet), inches: printDecimal(height.inches, mark) }
  }
  return { unit: height.unit, value: printDecimal(height.value, mark) }
}
