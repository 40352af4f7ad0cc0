import { describe, expect, it } from 'vitest'
import { adviseMondo } from '#shared/advice/bootSize'
import { adviseSkiLength } from '#shared/advice/skiLength'

describe('advice on sizes', () => {
  it('takes a measured foot up to the next half size', () => {
    expect(adviseMondo({ footMm: 261 })).toBe(265)
    expect(adviseMondo({ footMm: 265 })).toBe(265)
  })

  // EU sizes count two thirds of a centimetre, UK sizes a third of an inch from 25/3 inches on (definitions of the
  // systems); 15 mm between last and foot and the men's US scale are invented
  it.each([
    [{ size: '42', system: 'eu' }, 265],
    [{ size: '37,5', system: 'eu' }, 235],
    [{ size: '8', system: 'uk' }, 265],
    [{ size: '9', system: 'us' }, 265],
  ] as const)('reads a shoe size: %o', (shoe, mondo) => {
    expect(adviseMondo(shoe)).toBe(mondo)
  })

  it('says nothing where the size cannot be read', () => {
    expect(adviseMondo(null)).toBeNull()
    expect(adviseMondo({ size: 'medium', system: 'eu' })).toBeNull()
    expect(adviseMondo({ size: '99', system: 'eu' })).toBeNull()
  })

  it('gives a surer skier a longer ski, and keeps a child short', () => {
    const height = { unit: 'cm', value: 172 } as const
    expect(adviseSkiLength({ height, age: 34, skierType: 'II' })).toEqual({ minCm: 154, maxCm: 167 })
    expect(adviseSkiLength({ height, age: 34, skierType: 'III' }).maxCm).toBe(172)
    const child = { height: { unit: 'cm', value: 120 }, age: 8, skierType: 'II' } as const
    expect(adviseSkiLength(child)).toEqual({ minCm: 90, maxCm: 108 })
  })
})
