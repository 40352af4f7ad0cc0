import { describe, expect, it } from 'vitest'
import { computeFitting } from '#shared/fitting/computeFitting'
import type { FittingFacts } from '#shared/schemas/fittingFacts'
import { decided, factsWith, ids, inputsWith, ladder, ownBoots, pairWith, shopBoots } from './facts'

const stopsOf = (changes: Partial<FittingFacts>) => computeFitting(factsWith(changes)).stops
const reasons = (changes: Partial<FittingFacts>) => stopsOf(changes).map(({ reason }) => reason)

describe('what stops a fitting', () => {
  it('is nothing for racked boots on a racked pair that takes them', () => {
    const computed = computeFitting(factsWith())
    expect(computed.stops).toEqual([])
    expect(computed.ready).toBe(true)
  })

  it('is a sole type that the binding refuses, and nobody decides it away', () => {
    const boots = { ...shopBoots, soleType: 'ISO 9523' as const }
    const facts = { boots, decisions: [decided('unknown_sole')] }
    expect(stopsOf(facts)).toMatchObject([{ reason: 'sole_type_refused', decides: 'nobody', kind: null }])
  })

  it('is a sole type that nobody could read, until a head technician decides', () => {
    const boots = { ...shopBoots, soleType: 'unknown' as const }
    expect(stopsOf({ boots })).toMatchObject([
      { reason: 'sole_type_unknown', decides: 'head_technician', kind: 'unknown_sole' },
    ])
    const computed = computeFitting(factsWith({ boots, decisions: [decided('unknown_sole')] }))
    expect(computed.ready).toBe(true)
    expect(computed.decisions.map(({ kind }) => kind)).toEqual(['unknown_sole'])
  })

  it('is not taken away by a decision about another pair or other boots', () => {
    const boots = { ...shopBoots, soleType: 'unknown' as const }
    for (const other of [{ skiPairId: ids.other }, { bootsId: ids.other }])
      expect(reasons({ boots, decisions: [decided('unknown_sole', other)] })).toEqual(['sole_type_unknown'])
  })

  it.each([
    [253, 'sole_shorter_than_track'],
    [381, 'sole_longer_than_track'],
  ])('is a sole of %d mm on a track for 254 to 380 mm', (soleLengthMm, reason) => {
    expect(reasons({ boots: { ...shopBoots, soleLengthMm } })).toContain(reason)
  })

  it('is a sole that no notch brings into the window, or into the middle', () => {
    const narrow = { ...ladder, gapWindowMm: { min: -0.5, max: 0.5 } }
    const off = { ...ladder, centreWindowMm: 0.1 }
    const boots = { ...shopBoots, soleLengthMm: 306 }
    expect(reasons({ boots, skiPair: pairWith({}, { track: narrow }) })).toEqual(['no_position_in_window'])
    expect(reasons({ boots, skiPair: pairWith({ offsetMm: 1.5 }, { track: off }) })).toEqual(['off_centre'])
  })

  it('is a value outside the scale of a unit, with its correction', () => {
    const low = pairWith({}, { track: { ...ladder, releaseValue: { min: 8, max: 14 } } })
    expect(stopsOf({ skiPair: low })).toMatchObject([
      { reason: 'value_below_scale', decides: 'nobody', params: { min: 8, max: 14, units: 4 } },
    ])
    const pair = pairWith()
    const corrected = { ...pair.skis.left, toeCorrection: 6 }
    const skiPair = { ...pair, skis: { ...pair.skis, left: corrected } }
    expect(stopsOf({ skiPair })).toMatchObject([{ reason: 'value_above_scale', params: { units: 1 } }])
  })

  it('is what the table refuses, and it names no body value', () => {
    const inputs = inputsWith({ mass: { unit: 'kg', value: 9 }, age: 3, height: { unit: 'cm', value: 95 } })
    expect(stopsOf({ inputs })).toEqual([
      { reason: 'mass_below_table', subject: 'renter', decides: 'nobody', kind: null, params: {} },
    ])
    const light = inputsWith({ mass: { unit: 'kg', value: 21 }, skierType: 'III' })
    expect(reasons({ inputs: light })).toEqual(['type_not_allowed_under_22_kg'])
    const child = inputsWith({ age: 9, request: 1 })
    expect(reasons({ inputs: child })).toEqual(['request_not_allowed'])
  })

  it('is a row without values', () => {
    const inputs = inputsWith({
      mass: { unit: 'kg', value: 120 },
      height: { unit: 'cm', value: 200 },
      skierType: 'III+',
    })
    expect(reasons({ inputs })).toEqual(['row_without_values'])
  })

  it.each(['unchecked', 'service', 'withdrawn', 'quarantine', 'out', 'lost', 'retired'] as const)(
    'is a pair or boots that are %s',
    (state) => {
      expect(stopsOf({ skiPair: pairWith({ state }) })).toMatchObject([
        { reason: 'item_state', subject: 'ski_pair', decides: 'nobody', params: { code: 'S417', state } },
      ])
      expect(reasons({ boots: { ...shopBoots, state } })).toEqual(['item_state'])
    },
  )

  it('is an item that somebody else has, and it says who and since when', () => {
    const skiPairHolder = {
      fittingId: ids.other,
      number: 12,
      rentalId: ids.other,
      by: 'Arvid Lenk',
      since: '2027-01-15T08:41:00.000Z',
    }
    expect(stopsOf({ skiPair: pairWith({ state: 'claimed' }), skiPairHolder })).toMatchObject([
      { reason: 'item_taken', params: { by: 'Arvid Lenk', since: '2027-01-15T08:41:00.000Z' } },
    ])
  })

  it("is not an item of the renter's own open fitting, which the new one replaces", () => {
    const openFitting = {
      id: ids.other,
      number: 12,
      state: 'claimed' as const,
      skiPairId: ids.pair,
      bootsId: ids.boots,
      value: 6.5,
      by: 'Arvid Lenk',
      since: '2027-01-15T08:41:00.000Z',
    }
    const skiPair = pairWith({ state: 'claimed' })
    expect(reasons({ openFitting, skiPair, boots: { ...shopBoots, state: 'claimed' } })).toEqual([])
  })

  it('is a binding model that is not approved, or is blocked', () => {
    expect(stopsOf({ skiPair: pairWith({}, { approved: false }) })).toMatchObject([
      { reason: 'binding_model_not_approved', decides: 'head_technician', kind: null },
    ])
    expect(reasons({ skiPair: pairWith({}, { blockedReason: 'recall' }) })).toEqual(['binding_model_blocked'])
  })

  it("is the renter's own boots until somebody else looked, or a head technician judged them", () => {
    const unseen = { ...ownBoots, secondLookBy: null }
    expect(stopsOf({ boots: unseen })).toMatchObject([{ reason: 'own_boots_unseen', decides: 'second_look' }])
    expect(reasons({ boots: ownBoots })).toEqual([])
    expect(reasons({ boots: { ...unseen, judgedByHead: true } })).toEqual([])
    expect(reasons({ boots: unseen, decisions: [decided('own_boots')] })).toEqual([])
  })

  it('is a worn sole of their own boots, which a second look does not take away', () => {
    const worn = { ...ownBoots, wear: 'worn' as const }
    expect(stopsOf({ boots: worn })).toMatchObject([{ reason: 'own_boots_worn', decides: 'head_technician' }])
  })

  it.each([
    ['2027-01-28', []],
    ['2027-01-29', ['period_needs_test']],
  ])('is a period of 15 days, first and last included: 15 January to %s', (endsOn, expected) => {
    expect(reasons({ rental: { ...factsWith().rental, endsOn } })).toEqual(expected)
  })

  it.each(['form', 'waiting', 'returned', 'cancelled'] as const)('is a rental that is %s', (state) => {
    expect(reasons({ rental: { ...factsWith().rental, state } })).toEqual(['rental_not_open'])
  })

  it('says what is missing instead of guessing', () => {
    const computed = computeFitting(factsWith({ inputs: null, boots: null, skiPair: null }))
    expect(computed.missing).toEqual(['inputs', 'boots', 'ski_pair'])
    expect(computed).toMatchObject({ ready: false, outcome: null, plan: null, targets: null })
  })
})

describe('what a clerk should know without stopping', () => {
  const warnings = (changes: Partial<FittingFacts>) =>
    computeFitting(factsWith(changes)).warnings.map(({ reason }) => reason)

  it('is a declared mass near a row border; a measured one was measured', () => {
    // 66 and 67 kg stand on the two sides of a border of the selection table
    const inputs = inputsWith({ mass: { unit: 'kg', value: 66 }, massSource: 'declared', massBy: null })
    expect(warnings({ inputs })).toContain('measure')
    expect(warnings({ inputs: { ...inputs, massSource: 'measured' } })).not.toContain('measure')
  })

  it('is a unit with a correction, a preset that nobody read, and an item of the other site', () => {
    const pair = pairWith({ siteId: ids.other })
    const skiPair = {
      ...pair,
      skis: { left: { ...pair.skis.left, heelCorrection: 0.5 }, right: { ...pair.skis.right, preset: null } },
    }
    expect(warnings({ skiPair })).toEqual(['correction', 'preset_unknown', 'other_site'])
  })
})
