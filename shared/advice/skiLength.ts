import { ageRule, type SkierType } from '#shared/release/rules'
import type { Height } from '#shared/units/bodySchemas'
import { cmOf } from '#shared/units/convert'

/** Ski length from body height in cm, by skier type. Invented starting values; a shop knows its own skis better. */
export const lengthFromHeightCm: Readonly<Record<SkierType, { min: number; max: number }>> = {
  'I-': { min: -30, max: -15 },
  I: { min: -25, max: -10 },
  II: { min: -18, max: -5 },
  III: { min: -12, max: 0 },
  'III+': { min: -10, max: 3 },
}

/** Children are kept shorter, whatever their type. Invented. */
export const childLengthFromHeightCm = { min: -30, max: -12 } as const

/** What length of ski to look for first, in whole cm. Advice, never a stop. */
export function adviseSkiLength({
  height,
  age,
  skierType,
}: {
  height: Height
  age: number
  skierType: SkierType
}): { minCm: number; maxCm: number } {
  const { min, max } = age <= ageRule.childUpTo ? childLengthFromHeightCm : lengthFromHeightCm[skierType]
  const cm = Math.round(cmOf(height))
  return { minCm: cm + min, maxCm: cm + max }
}
