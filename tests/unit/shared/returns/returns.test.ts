import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { dueStanding } from '#shared/returns/dueToday'
import { mixedPair, type ScannedIn } from '#shared/returns/mixedPair'
import { partCode, stillToScan, stillToScanCodes, type SetPart } from '#shared/returns/setParts'

const ski = (code: string, side: 'left' | 'right', missing: ScannedIn['missing']): ScannedIn => ({
  itemKind: 'ski_pair',
  code,
  side,
  missing,
})

describe('two skis scanned one after the other', () => {
  it('are said to be of two pairs, with the mate of each, when the first one has not got its own', () => {
    expect(mixedPair(ski('S121', 'left', ['right']), ski('S77', 'right', ['left']))).toEqual({
      scanned: ['S121L', 'S77R'],
      mates: ['S121R', 'S77L'],
    })
  })

  it('are no mixed pair when they are left and right of one pair', () => {
    expect(mixedPair(ski('S121', 'left', ['right']), ski('S121', 'right', []))).toBeNull()
  })

  it('are no mixed pair when the first pair was complete before the second began', () => {
    expect(mixedPair(ski('S121', 'right', []), ski('S77', 'left', ['right']))).toBeNull()
  })

  it('are no mixed pair when a boot follows a ski, or when nothing was scanned before', () => {
    const boot: ScannedIn = { itemKind: 'boots', code: 'B12', side: 'left', missing: ['right'] }
    expect(mixedPair(ski('S121', 'left', ['right']), boot)).toBeNull()
    expect(mixedPair(null, boot)).toBeNull()
  })

  it('are told for two boots of two pairs in the same way', () => {
    const boot = (code: string): ScannedIn => ({ itemKind: 'boots', code, side: 'left', missing: ['right'] })
    expect(mixedPair(boot('B12'), boot('B13'))?.mates).toEqual(['B12R', 'B13R'])
  })
})

const part = (
  itemKind: SetPart['itemKind'],
  code: string | null,
  side: SetPart['side'],
  back = false,
): SetPart => ({ itemKind, itemId: code ?? 'own', code, side, back })

const wholeSet = [
  part('boots', 'B340', 'right'),
  part('own_boots', null, 'both'),
  part('boots', 'B340', 'left'),
  part('ski_pair', 'S512', 'right'),
  part('ski_pair', 'S512', 'left'),
]

describe('what is still to come of a set', () => {
  it('is the right ski first after its left ski was scanned, then the boots', () => {
    const set = wholeSet.map((each) => ({ ...each, back: each.code === 'S512' && each.side === 'left' }))
    expect(stillToScanCodes(set, 'S512')).toEqual(['S512R', 'B340'])
  })

  it('is the other boot first after one boot was scanned, and the skis after it', () => {
    const set = wholeSet.map((each) => ({ ...each, back: each.code === 'B340' && each.side === 'right' }))
    expect(stillToScanCodes(set, 'B340')).toEqual(['B340L', 'S512'])
  })

  it('names the own boots last, which have no code to scan', () => {
    expect(stillToScan(wholeSet, null).at(-1)?.itemKind).toBe('own_boots')
    expect(partCode(part('own_boots', null, 'both'))).toBeNull()
  })

  it('is every part that is not back, once each, whatever the order they are listed in', () => {
    fc.assert(
      fc.property(
        fc.shuffledSubarray(wholeSet, { minLength: wholeSet.length }),
        fc.array(fc.boolean(), { minLength: wholeSet.length, maxLength: wholeSet.length }),
        (shuffled, back) => {
          const set = shuffled.map((each, index) => ({ ...each, back: back[index]! }))
          const open = stillToScan(set, 'S512')
          expect(new Set(open)).toEqual(new Set(set.filter((each) => !each.back)))
          expect(open.length).toBe(set.filter((each) => !each.back).length)
        },
      ),
    )
  })
})

describe('a set that is due', () => {
  const today = '2026-02-14'
  it('is back, partly back, still out, or late', () => {
    expect(dueStanding({ endsOn: today, parts: 4, out: 0 }, today)).toBe('back')
    expect(dueStanding({ endsOn: today, parts: 4, out: 1 }, today)).toBe('part_back')
    expect(dueStanding({ endsOn: today, parts: 4, out: 4 }, today)).toBe('out')
    expect(dueStanding({ endsOn: '2026-02-13', parts: 4, out: 1 }, today)).toBe('late')
    expect(dueStanding({ endsOn: '2026-02-13', parts: 4, out: 0 }, today)).toBe('back')
  })
})
