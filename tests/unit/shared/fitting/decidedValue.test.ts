import { describe, expect, it } from 'vitest'
import { computeFitting } from '#shared/fitting/computeFitting'
import { valueOptions } from '#shared/fitting/valueOptions'
import { decided, factsWith, inputsWith, ladder, pairWith, shopBoots } from './facts'

// 72 kg, 172 cm, type II, 34 years: rows K and K, one down: L; sole 305 mm: column to 310 mm.
// Values of rows J to N there: 4.5 5.5 6.5 8 9.5 (tests/reference/fixtures/selectionTable)
const facts = factsWith()

describe('a value that a head technician decides', () => {
  it('is offered up to two rows either way, the second row up with a second name', () => {
    expect(computeFitting(facts).outcome).toMatchObject({ row: 'L', value: 6.5 })
    expect(
      valueOptions(facts).map(({ rows, value, secondName, refused }) => [rows, value, secondName, refused]),
    ).toEqual([
      [-2, 4.5, false, null],
      [-1, 5.5, false, null],
      [1, 8, false, null],
      [2, 9.5, true, null],
    ])
  })

  it('counts from the row without the request', () => {
    const asked = factsWith({ inputs: inputsWith({ request: -1 }) })
    expect(computeFitting(asked).outcome?.value).toBe(5.5)
    expect(valueOptions(asked).map(({ value }) => value)).toEqual([4.5, 5.5, 8, 9.5])
  })

  it('stays inside the scale of every unit', () => {
    const skiPair = pairWith({}, { track: { ...ladder, releaseValue: { min: 5, max: 8 } } })
    expect(valueOptions(factsWith({ skiPair })).map(({ refused }) => refused)).toEqual([
      'outside_scale',
      null,
      null,
      'outside_scale',
    ])
  })

  it.each([
    ['9 years old', inputsWith({ age: 9, skierType: 'I' })],
    ['21 kg', inputsWith({ age: 10, skierType: 'I', mass: { unit: 'kg', value: 21.9 } })],
    ['47 lb', inputsWith({ age: 10, skierType: 'I', mass: { unit: 'lb', value: 47.5 } })],
  ])('never goes up for somebody of %s', (_who, inputs) => {
    const track = { ...ladder, releaseValue: { min: 0.75, max: 10 } }
    const child = factsWith({
      inputs,
      skiPair: pairWith({}, { track }),
      boots: { ...shopBoots, soleLengthMm: 260 },
    })
    const up = valueOptions(child).filter(({ rows }) => rows > 0)
    expect(up.map(({ refused }) => refused)).toEqual(['not_for_children', 'not_for_children'])
    const value = up[0]?.value ?? null
    const forced = computeFitting({ ...child, decisions: [decided('value_override', { rows: 1, value })] })
    expect(forced.decisions).toEqual([])
    expect(forced.warnings.map(({ reason }) => reason)).toContain('decision_outdated')
  })

  it('is what the bench sets, and says how many rows it was moved', () => {
    const decision = decided('value_override', { rows: 1, value: 8 })
    const computed = computeFitting({ ...facts, decisions: [decision] })
    expect(computed.outcome).toMatchObject({ row: 'M', value: 8 })
    expect(computed.outcome?.rowSteps.at(-1)).toEqual({ rule: 'decision', rows: 1 })
    expect(computed.targets).toEqual({ left: { toe: 8, heel: 8 }, right: { toe: 8, heel: 8 } })
    expect(computed.decisions).toEqual([decision])
  })

  it('no longer counts once the renter has other data', () => {
    const before = decided('value_override', { rows: 1, value: 8, at: '2027-01-15T07:59:00.000Z' })
    expect(computeFitting({ ...facts, decisions: [before] }).outcome?.value).toBe(6.5)
    // and never while it is another value than the table gives now
    const other = decided('value_override', { rows: 1, value: 7.5 })
    const computed = computeFitting({ ...facts, decisions: [other] })
    expect(computed.outcome?.value).toBe(6.5)
    expect(computed.warnings.map(({ reason }) => reason)).toContain('decision_outdated')
  })

  it('is taken back by deciding for the computed one', () => {
    const decisions = [
      decided('value_override', { rows: 1, value: 8 }),
      decided('value_override', { rows: 0, at: '2027-01-15T08:40:00.000Z' }),
    ]
    expect(computeFitting({ ...facts, decisions })).toMatchObject({ outcome: { value: 6.5 }, decisions: [] })
  })
})

describe('a sole that is longer than the row has values for', () => {
  // a light row and a long sole
  const inputs = inputsWith({
    mass: { unit: 'kg', value: 20 },
    height: { unit: 'cm', value: 115 },
    age: 10,
    skierType: 'I',
  })
  const track = { ...ladder, releaseValue: { min: 0.5, max: 10 } }
  const long = factsWith({
    inputs,
    skiPair: pairWith({}, { track }),
    boots: { ...shopBoots, soleLengthMm: 345 },
  })

  it('stops until a head technician takes the nearest value', () => {
    const computed = computeFitting(long)
    expect(computed.stops).toMatchObject([{ reason: 'sole_longer_than_row', kind: 'sideways_value' }])
    expect(computed.outcome).toBeNull()
    const value = Number(computed.stops[0]?.params.value)
    const decision = decided('sideways_value', { value })
    const taken = computeFitting({ ...long, decisions: [decision] })
    expect(taken).toMatchObject({ ready: true, stops: [], outcome: { value, sideways: true } })
    expect(taken.decisions).toEqual([decision])
  })

  it('still stops when the decision was about another value', () => {
    const computed = computeFitting({ ...long, decisions: [decided('sideways_value', { value: 9 })] })
    expect(computed.ready).toBe(false)
    expect(computed.stops.map(({ reason }) => reason)).toEqual(['sole_longer_than_row'])
    expect(valueOptions(long)).toEqual([])
  })
})
