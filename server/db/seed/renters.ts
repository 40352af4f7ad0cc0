import { releaseSetting } from '#shared/release/releaseSetting'
import type { ReleaseInput } from '#shared/release/releaseInput'
import type { ReleaseSetting } from '#shared/release/releaseResult'
import { trackPlan, type TrackTarget } from '#shared/track/trackPlan'
import { targetIndicator } from '#shared/track/targetIndicator'
import type { Height, Mass } from '#shared/units/bodySchemas'
import type { Chance } from './chance'
import type { DemoBoots, DemoFleet, DemoPair } from './fleet'
import { firstNames, lastNames } from './people'

export interface DemoRenter {
  firstName: string
  lastName: string
  age: number
  mass: Mass
  height: Height
  heightCm: number
  skierType: ReleaseInput['skierType']
  mondo: number
}

export interface DemoMatch {
  pair: DemoPair
  boots: DemoBoots
  setting: ReleaseSetting
  target: TrackTarget
}

/** An invented person: one in four a child, the rest adults; a few in pounds and feet. */
export function inventRenter(chance: Chance): DemoRenter {
  const child = chance.happens(0.26)
  const age = child ? chance.int(5, 14) : chance.int(16, 68)
  const heightCm = child ? 78 + age * 6 + chance.int(-4, 6) : chance.int(156, 194)
  const massKg = child
    ? Math.round((heightCm / 100) ** 2 * (14.5 + age * 0.28 + chance.next() * 2))
    : Math.round((heightCm / 100) ** 2 * (20 + chance.next() * 7))
  const imperial = !child && chance.happens(0.12)
  const skierType =
    massKg <= 21
      ? chance.pick(['I', 'II'] as const)
      : chance.pick(['I', 'I', 'II', 'II', 'II', 'III'] as const)
  return {
    firstName: chance.pick(firstNames),
    lastName: chance.pick(lastNames),
    age,
    heightCm,
    skierType,
    mass: imperial ? { unit: 'lb', value: Math.round(massKg * 2.2046) } : { unit: 'kg', value: massKg },
    height: imperial
      ? { unit: 'ft-in', feet: Math.floor(heightCm / 30.48), inches: Math.floor((heightCm % 30.48) / 2.54) }
      : { unit: 'cm', value: heightCm },
    mondo: Math.round(heightCm * (child ? 1.52 : 1.53)),
  }
}

/** Boots and a pair that are free and fit this person; null when the demo shop has none that day. */
export function matchFor(
  renter: DemoRenter,
  fleet: DemoFleet,
  free: (item: DemoPair | DemoBoots) => boolean,
  chance: Chance,
): DemoMatch | null {
  const near = fleet.boots.filter((boots) => free(boots) && Math.abs(boots.mondo - renter.mondo) <= 10)
  for (let tries = 0; tries < 6 && near.length > 0; tries += 1) {
    const boots = chance.pick(near)
    const setting = releaseSetting({ ...inputOf(renter), soleLengthMm: boots.soleLengthMm })
    if (!setting.ok) continue
    const pairs = fleet.pairs.filter(
      (pair) =>
        free(pair) &&
        pair.accepts.includes(boots.soleType) &&
        Math.abs(pair.lengthCm - renter.heightCm + 8) <= 16,
    )
    for (let look = 0; look < 6 && pairs.length > 0; look += 1) {
      const pair = chance.pick(pairs)
      const target = trackPlan(pair.track, boots.soleLengthMm)
      if (target.ok && targetIndicator(pair.track, setting.value).ok) return { pair, boots, setting, target }
    }
  }
  return null
}

export function inputOf({ mass, height, age, skierType }: DemoRenter): Omit<ReleaseInput, 'soleLengthMm'> {
  return { mass, height, age, skierType }
}
