import { describe, expect, it } from 'vitest'
import type { ScannedToday } from '#shared/api/returns'
import { scanLines } from '../../../../../src/components/returns/scanLines'

const scan = (id: string, more: Partial<ScannedToday>): ScannedToday => ({
  id,
  itemKind: 'ski_pair',
  itemId: 'pair',
  code: 'S417',
  side: 'left',
  at: '2026-02-14T15:04:00Z',
  stateBefore: 'out',
  state: 'unchecked',
  rackPlace: null,
  missing: [],
  rentalId: 'rental',
  rentalNumber: 12,
  renter: 'Oriel V.',
  soleLengthReadMm: null,
  fittedSoleLengthMm: null,
  ...more,
})

describe('the list of what was scanned in', () => {
  it('draws left and right of a pair together, at the place of the newer scan', () => {
    const lines = scanLines([
      scan('3', { side: 'right', at: '2026-02-14T15:06:00Z' }),
      scan('2', { itemId: 'boots', itemKind: 'boots', code: 'B288' }),
      scan('1', { side: 'left' }),
    ])
    expect(lines.map(({ code, sides, at }) => [code, sides.join(' '), at.slice(11, 16)])).toEqual([
      ['S417', 'left right', '15:06'],
      ['B288', 'left', '15:04'],
    ])
  })

  it('keeps two rentals of one pair on one day apart, and scans of what was not out each by itself', () => {
    const lines = scanLines([
      scan('4', { rentalId: null, rentalNumber: null }),
      scan('3', { rentalId: null, rentalNumber: null }),
      scan('2', { rentalId: 'evening' }),
      scan('1', { rentalId: 'morning' }),
    ])
    expect(lines).toHaveLength(4)
  })

  it('says that other boots came back when another sole length was read', () => {
    const own = { itemKind: 'own_boots', code: null, side: 'both', state: null } as const
    const [same, other] = scanLines([
      scan('2', { ...own, itemId: 'a', soleLengthReadMm: 305, fittedSoleLengthMm: 305 }),
      scan('1', { ...own, itemId: 'b', soleLengthReadMm: 317, fittedSoleLengthMm: 305 }),
    ])
    expect([same!.differs, other!.differs]).toEqual([false, true])
  })
})
