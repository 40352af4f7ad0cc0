import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cmOf, heightShownBack, inOtherSystem, kgOf, lbOf, massShownBack } from '#shared/units/convert'
import { decimalPlaces, exactDifference, exactSum, nearestDouble, scaledTo } from '#shared/units/exact'
import { heightSchema, massSchema } from '#shared/units/bodySchemas'
import {
  parseDecimal,
  parseHeight,
  parseMass,
  printHeight,
  printMass,
  typedHeight,
  typedMass,
} from '#shared/units/typed'
import { anyHeight, anyMass } from '../release/arbitraries'

describe('numbers as people type them', () => {
  it('take a decimal comma and a decimal point', () => {
    expect(['70', '70,5', '70.5', ' 9 ', '5.'].map(parseDecimal)).toEqual([70, 70.5, 70.5, 9, 5])
  })
  it('are nothing else', () => {
    expect(['', '-5', '1e2', '70kg', '1.234,5', '7 0', '٣', 'NaN', '.5'].map(parseDecimal)).toEqual(
      Array(9).fill(null),
    )
  })
})

describe('a mass', () => {
  it('keeps the unit in which it was typed', () => {
    expect(parseMass({ unit: 'kg', value: '70,5' })).toEqual({ ok: true, mass: { unit: 'kg', value: 70.5 } })
    expect(parseMass({ unit: 'st-lb', stone: '11', pounds: '' })).toEqual({
      ok: true,
      mass: { unit: 'st-lb', stone: 11, pounds: 0 },
    })
  })

  it('reads back as what was printed into its fields, with either decimal mark', () => {
    fc.assert(
      fc.property(anyMass, fc.constantFrom('.' as const, ',' as const), (mass, mark) => {
        expect(parseMass(typedMass(mass, mark))).toEqual({ ok: true, mass })
      }),
    )
  })

  it('is shown back in both other units', () => {
    expect(massShownBack({ unit: 'kg', value: 70 })).toEqual([
      { unit: 'lb', value: 154 },
      { unit: 'st-lb', stone: 11, pounds: 0 },
    ])
    expect(massShownBack({ unit: 'st-lb', stone: 11, pounds: 3 })).toEqual([
      { unit: 'kg', value: 71.2 },
      { unit: 'lb', value: 157 },
    ])
  })

  it('shown back differs from what was typed by no more than the rounding', () => {
    fc.assert(
      fc.property(anyMass, (mass) => {
        for (const shown of massShownBack(mass)) {
          expect(Math.abs(kgOf(shown) - kgOf(mass))).toBeLessThanOrEqual(
            shown.unit === 'kg' ? 0.0501 : 0.2269,
          )
        }
      }),
    )
  })

  it('says which field is wrong and what it may hold', () => {
    expect(parseMass({ unit: 'kg', value: '' })).toEqual({ ok: false, field: 'value', reason: 'empty' })
    expect(parseMass({ unit: 'kg', value: '700' })).toEqual({
      ok: false,
      field: 'value',
      reason: 'out_of_limits',
      limits: { min: 1, max: 300 },
    })
    expect(parseMass({ unit: 'st-lb', stone: '11,5', pounds: '3' })).toMatchObject({
      field: 'stone',
      reason: 'not_whole',
    })
    expect(parseMass({ unit: 'st-lb', stone: '11', pounds: '14' })).toMatchObject({
      field: 'pounds',
      reason: 'out_of_limits',
    })
    expect(parseMass({ unit: 'st-lb', stone: '60', pounds: '1' })).toMatchObject({
      field: 'stone',
      reason: 'out_of_limits',
    })
  })

  it('prints in every unit', () => {
    expect(printMass({ unit: 'kg', value: 70.5 }, ',')).toBe('70,5 kg')
    expect(printMass({ unit: 'st-lb', stone: 11, pounds: 3 })).toBe('11 st 3 lb')
  })
})

describe('a height', () => {
  it('reads back as what was printed into its fields', () => {
    fc.assert(
      fc.property(anyHeight, fc.constantFrom('.' as const, ',' as const), (height, mark) => {
        expect(parseHeight(typedHeight(height, mark))).toEqual({ ok: true, height })
      }),
    )
  })

  it('is shown back in the other unit', () => {
    expect(heightShownBack({ unit: 'cm', value: 175 })).toEqual([{ unit: 'ft-in', feet: 5, inches: 9 }])
    expect(heightShownBack({ unit: 'cm', value: 182.5 })).toEqual([{ unit: 'ft-in', feet: 6, inches: 0 }])
    expect(heightShownBack({ unit: 'ft-in', feet: 5, inches: 9 })).toEqual([{ unit: 'cm', value: 175 }])
  })

  it('typed in metres is named as such', () => {
    expect(parseHeight({ unit: 'cm', value: '1,75' })).toMatchObject({ reason: 'looks_like_metres' })
    expect(parseHeight({ unit: 'cm', value: '17' })).toMatchObject({ reason: 'out_of_limits' })
  })

  it('prints in every unit', () => {
    expect(printHeight({ unit: 'cm', value: 175 })).toBe('175 cm')
    expect(printHeight({ unit: 'ft-in', feet: 5, inches: 9.5 }, ',')).toBe('5 ft 9,5 in')
  })
})

describe('what parses is well formed, and what is well formed parses', () => {
  const text = fc.oneof(fc.integer({ min: 0, max: 700 }).map(String), fc.string({ maxLength: 4 }))
  it('for masses and heights alike', () => {
    fc.assert(
      fc.property(text, text, (first, second) => {
        for (const parsed of [
          parseMass({ unit: 'kg', value: first }),
          parseMass({ unit: 'lb', value: first }),
          parseMass({ unit: 'st-lb', stone: first, pounds: second }),
        ]) {
          if (parsed.ok) expect(massSchema.safeParse(parsed.mass).success).toBe(true)
        }
        for (const parsed of [
          parseHeight({ unit: 'cm', value: first }),
          parseHeight({ unit: 'ft-in', feet: first, inches: second }),
        ]) {
          if (parsed.ok) expect(heightSchema.safeParse(parsed.height).success).toBe(true)
        }
      }),
    )
  })
})

describe('conversions', () => {
  // the international pound and inch, exact by definition
  it('are exact: 1 lb is 0.45359237 kg, 50 in are 127 cm', () => {
    expect(kgOf({ unit: 'lb', value: 100 })).toBe(45.359237)
    expect(cmOf({ unit: 'ft-in', feet: 4, inches: 2 })).toBe(127)
    expect(inOtherSystem({ unit: 'cm', value: 127 })).toEqual({ unit: 'ft-in', feet: 4, inches: 2 })
    expect(inOtherSystem({ unit: 'cm', value: 152.4 })).toEqual({ unit: 'ft-in', feet: 5, inches: 0 })
    expect(lbOf({ unit: 'st-lb', stone: 11, pounds: 3.1 })).toBe(157.1)
  })
})

describe('exact arithmetic', () => {
  it('has no binary fractions in it', () => {
    expect(exactDifference(0.3, 0.1)).toBe(0.2)
    expect(exactSum(0.1, 0.2)).toBe(0.3)
    expect(exactDifference(1e-7, 3e-7)).toBe(-2e-7)
  })

  it('is not misled where a product rounds to half a part', () => {
    expect(scaledTo(447530865316.7374, 4)).toBe(4475308653167374n)
  })

  it('gives every number back as the same number', () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true, min: -1e200, max: 1e200 }), (value) => {
        fc.pre(value === 0 || Math.abs(value) > 1e-200)
        const places = decimalPlaces(value)
        expect(nearestDouble(scaledTo(value, places), 10n ** BigInt(places))).toBe(value === 0 ? 0 : value)
      }),
      { numRuns: 2000 },
    )
  })

  it('rounds a quotient of large numbers as the division of small ones does', () => {
    fc.assert(
      fc.property(
        fc.maxSafeInteger(),
        fc.integer({ min: 1 }),
        fc.bigInt({ min: 1n, max: 10n ** 40n }),
        (a, b, factor) => {
          expect(nearestDouble(BigInt(a) * factor, BigInt(b) * factor)).toBe(a === 0 ? 0 : a / b)
        },
      ),
    )
  })

  it('stops at the largest number instead of infinity', () => {
    expect(nearestDouble(-(10n ** 400n), 1n)).toBe(-Number.MAX_VALUE)
  })
})
