import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { releaseInputSchema, type ReleaseInput } from '#shared/release/releaseInput'
import { releaseSetting } from '#shared/release/releaseSetting'
import { anyInput, heavier } from './arbitraries'

const runs = { numRuns: 5000 }
const middling: ReleaseInput = {
  mass: { value: 85, unit: 'kg' },
  height: { feet: 5, inches: 9.5, unit: 'ft-in' },
  age: 55,
  skierType: 'III',
  soleLengthMm: 310.5,
}

describe('a release value', () => {
  it('is never lower for more mass, all else equal', () => {
    fc.assert(
      fc.property(anyInput, fc.integer({ min: 1, max: 1000 }), (input, more) => {
        const light = releaseSetting(input)
        const heavy = releaseSetting({ ...input, mass: heavier(input.mass, more) })
        if (light.ok && heavy.ok) expect(heavy.value).toBeGreaterThanOrEqual(light.value)
      }),
      runs,
    )
  })

  it('is never higher for a longer sole, all else equal', () => {
    fc.assert(
      fc.property(anyInput, fc.integer({ min: 1, max: 1000 }), (input, more) => {
        const short = releaseSetting(input)
        const long = releaseSetting({ ...input, soleLengthMm: Math.min(400, input.soleLengthMm + more / 10) })
        if (short.ok && long.ok) expect(long.value).toBeLessThanOrEqual(short.value)
      }),
      runs,
    )
  })

  it('is never lower for the next skier type and never higher for a request downwards', () => {
    fc.assert(
      fc.property(anyInput, (input) => {
        const [cautious, plain, lower] = [
          releaseSetting({ ...input, skierType: 'I', request: 0 }),
          releaseSetting({ ...input, skierType: 'II', request: 0 }),
          releaseSetting({ ...input, skierType: 'II', request: -1 }),
        ]
        if (cautious.ok && plain.ok) expect(plain.value).toBeGreaterThanOrEqual(cautious.value)
        if (lower.ok && plain.ok) expect(lower.value).toBeLessThanOrEqual(plain.value)
      }),
      runs,
    )
  })

  it('is the same whether the defaults are written out or left out', () => {
    fc.assert(
      fc.property(anyInput, ({ edition: _edition, request: _request, ...input }) => {
        expect(releaseSetting(input)).toEqual(
          releaseSetting({ ...input, edition: 'eight-column', request: 0 }),
        )
      }),
    )
  })

  it('explains every step with its numbers', () => {
    const result = releaseSetting(middling)
    expect(result).toMatchObject({ ok: true, row: 'L', value: 6 })
    expect('steps' in result ? result.steps : []).toEqual([
      { rule: 'mass', row: 'L', given: middling.mass, unit: 'kg', whole: 85, band: { min: 79, max: 94 } },
      { rule: 'height', row: 'K', given: middling.height, unit: 'in', whole: 69, band: { min: 66, max: 70 } },
      { rule: 'nearer_top', row: 'K', massRow: 'L', heightRow: 'K', decidedBy: 'height' },
      { rule: 'type', skierType: 'III', shift: 2 },
      { rule: 'age', age: 55, because: 'senior', shift: -1 },
      { rule: 'request', request: 0, shift: 0 },
      { rule: 'clamp', row: 'L', from: 'K', shift: 1, clampedAt: null },
      {
        rule: 'column',
        row: 'L',
        edition: 'eight-column',
        given: 310.5,
        soleLengthMm: 311,
        column: 5,
        band: { min: 311, max: 330 },
      },
      { rule: 'cell', row: 'L', column: 5, value: 6 },
    ])
  })

  it('explains a value taken from the side, and a row held at A', () => {
    const result = releaseSetting({ ...middling, soleLengthMm: 240 })
    expect('steps' in result ? result.steps.slice(-2) : []).toEqual([
      { rule: 'cell', row: 'L', column: 1, value: null },
      { rule: 'sideways', row: 'L', fromColumn: 1, column: 2, band: { min: 251, max: 270 }, value: 7.5 },
    ])
    const child = releaseSetting({
      ...middling,
      mass: { unit: 'kg', value: 12 },
      age: 4,
      skierType: 'I-',
      soleLengthMm: 215,
    })
    expect('steps' in child ? child.steps : []).toContainEqual({
      rule: 'clamp',
      row: 'A',
      from: 'A',
      shift: -2,
      clampedAt: 'A',
    })
  })

  it('explains a refusal as far as it went', () => {
    const light = releaseSetting({ ...middling, mass: { unit: 'kg', value: 9.9 } })
    expect(light).toMatchObject({
      reason: 'mass_below_table',
      steps: [{ rule: 'mass', row: null, band: { min: null, max: 9 } }],
    })
    const eager = releaseSetting({ ...middling, age: 8, request: 1 })
    expect('steps' in eager ? eager.steps.at(-1) : null).toEqual({
      rule: 'request_of_child',
      age: 8,
      ageUpTo: 9,
      unit: 'kg',
      upTo: 21,
    })
  })
})

describe('an input', () => {
  const loose = fc.record({
    mass: fc.oneof(
      fc.record({ unit: fc.constantFrom('kg' as const, 'lb' as const), value: fc.double() }),
      fc.record({
        unit: fc.constant('st-lb' as const),
        stone: fc.oneof(fc.integer({ min: -1, max: 50 }), fc.double()),
        pounds: fc.oneof(fc.double({ min: -1, max: 15 }), fc.constant(14)),
      }),
    ),
    height: fc.oneof(
      fc.record({ unit: fc.constant('cm' as const), value: fc.double({ min: 40, max: 260 }) }),
      fc.record({
        unit: fc.constant('ft-in' as const),
        feet: fc.integer({ min: 0, max: 9 }),
        inches: fc.double({ min: -1, max: 13 }),
      }),
    ),
    age: fc.oneof(fc.integer({ min: -2, max: 125 }), fc.double()),
    skierType: fc.constant('I' as const),
    soleLengthMm: fc.oneof(fc.integer({ min: 140, max: 410 }), fc.double()),
  })

  it('is refused by the calculation exactly when the schema refuses it', () => {
    fc.assert(
      fc.property(fc.oneof(loose, anyInput), (input) => {
        const result = releaseSetting(input)
        const refused = !result.ok && result.reason === 'invalid_input'
        expect(refused).toBe(!releaseInputSchema.safeParse(input).success)
      }),
      runs,
    )
  })

  it('with a field half filled names the field and gives no value', () => {
    expect(releaseSetting({ ...middling, age: Number.NaN })).toMatchObject({
      reason: 'invalid_input',
      path: ['age'],
    })
    expect(releaseSetting({ ...middling, mass: { unit: 'kg', value: Number.NaN } })).toMatchObject({
      path: ['mass'],
    })
  })

  it('of 47 stone 2 and the least fraction more is beyond 660 lb', () => {
    const at = (pounds: number) => ({ ...middling, mass: { unit: 'st-lb' as const, stone: 47, pounds } })
    expect(releaseInputSchema.safeParse(at(2)).success).toBe(true)
    expect(releaseInputSchema.safeParse(at(2.0000000000000004)).success).toBe(false)
    expect(releaseSetting(at(2.0000000000000004))).toMatchObject({ reason: 'invalid_input' })
  })
})
