import fc from 'fast-check'
import type { ReleaseInput } from '#shared/release/releaseInput'
import { skierTypes } from '#shared/release/rules'
import { editionNames } from '#shared/release/selectionTable'
import type { Height, Mass } from '#shared/units/bodySchemas'

const tenths = (min: number, max: number) =>
  fc.integer({ min: min * 10, max: max * 10 }).map((value) => value / 10)

export const anyMass: fc.Arbitrary<Mass> = fc.oneof(
  tenths(1, 300).map((value): Mass => ({ unit: 'kg', value })),
  tenths(2, 660).map((value): Mass => ({ unit: 'lb', value })),
  fc
    .record({ stone: fc.integer({ min: 1, max: 46 }), pounds: tenths(0, 13) })
    .map((parts): Mass => ({ unit: 'st-lb', ...parts })),
)

export const anyHeight: fc.Arbitrary<Height> = fc.oneof(
  tenths(50, 250).map((value): Height => ({ unit: 'cm', value })),
  fc
    .record({ feet: fc.integer({ min: 1, max: 8 }), inches: tenths(0, 11) })
    .map((parts): Height => ({ unit: 'ft-in', ...parts })),
)

export const anyInput: fc.Arbitrary<ReleaseInput> = fc.record(
  {
    mass: anyMass,
    height: anyHeight,
    age: fc.integer({ min: 0, max: 120 }),
    skierType: fc.constantFrom(...skierTypes),
    soleLengthMm: tenths(150, 400),
    edition: fc.constantFrom(...editionNames),
    request: fc.constantFrom(-1 as const, 0 as const, 1 as const),
  },
  { requiredKeys: ['mass', 'height', 'age', 'skierType', 'soleLengthMm'] },
)

/** The same mass with more of it, in its own unit, inside what a mass may be. */
export function heavier(mass: Mass, tenthsMore: number): Mass {
  const more = tenthsMore / 10
  if (mass.unit === 'st-lb') {
    const tenthsOfPounds = Math.min(Math.round(140 * mass.stone + 10 * mass.pounds) + tenthsMore, 6600)
    return { unit: 'st-lb', stone: Math.floor(tenthsOfPounds / 140), pounds: (tenthsOfPounds % 140) / 10 }
  }
  return { unit: mass.unit, value: Math.min(mass.value + more, mass.unit === 'kg' ? 300 : 660) }
}
