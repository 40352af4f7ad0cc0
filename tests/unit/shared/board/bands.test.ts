import { describe, expect, it } from 'vitest'
import { bandsOf, minutesBetween, setsOut } from '#shared/board/bands'
import { boardFrom } from '#shared/board/board'
import type { BoardFitting, BoardItem, BoardRental } from '#shared/schemas/board'

const at = (minute: number) => `2026-01-16T09:${String(minute).padStart(2, '0')}:00.000Z`

const rental = (
  id: string,
  state: BoardRental['state'],
  minute: number,
  more: Partial<BoardRental> = {},
): BoardRental => ({
  ...{
    id,
    number: 1,
    state,
    siteId: 'upper',
    arrivedAt: at(minute),
    promisedAt: at(minute + 20),
    endsOn: '2026-01-16',
    out: 0,
  },
  ...more,
})
const fitting = (
  id: string,
  rentalId: string,
  state: BoardFitting['state'],
  minute: number,
): BoardFitting => ({
  ...{
    id,
    number: 1,
    rentalId,
    skiPairId: 'pair',
    bootsId: null,
    siteId: 'upper',
    state,
    promisedAt: at(minute),
  },
  ...{ claimedAt: at(5), claimedBy: 'clerk', heldBy: null, heldSince: null, preparedAt: null },
})
const item = (id: string, state: BoardItem['state'], minute: number): BoardItem => ({
  ...{
    id,
    kind: 'ski_pair',
    code: 'S417',
    state,
    since: at(minute),
    siteId: 'upper',
    rackPlace: null,
    missing: [],
  },
})

const board = boardFrom({
  seq: 1,
  asOf: at(30),
  items: [item('pair', 'claimed', 5), item('back', 'unchecked', 20), item('longer back', 'unchecked', 10)],
  fittings: [
    fitting('later', 'r2', 'claimed', 40),
    fitting('sooner', 'r3', 'claimed', 30),
    fitting('ready', 'r4', 'prepared', 20),
  ],
  rentals: [
    rental('r0', 'waiting', 2),
    rental('r1', 'open', 3),
    ...['r2', 'r3', 'r4'].map((id) => rental(id, 'open', 4)),
    rental('r5', 'out', 1, { endsOn: '2026-01-16' }),
    rental('r6', 'out', 1, { endsOn: '2026-01-14', siteId: 'lower' }),
  ],
  callBacks: 0,
})
const ids = (entries: { id: string }[]) => entries.map(({ id }) => id)

describe('the bands of the board', () => {
  it('show everybody once, by what is to be done next', () => {
    const bands = bandsOf(board, null)
    expect(ids(bands.form)).toEqual(['r0'])
    expect(ids(bands.desk)).toEqual(['r1'])
    expect(ids(bands.handOver)).toEqual(['ready'])
  })

  it('show the ticket that was promised first, first', () => {
    expect(ids(bandsOf(board, null).bench)).toEqual(['sooner', 'later'])
  })

  it('show what came back longest ago first', () => {
    expect(ids(bandsOf(board, null).clear)).toEqual(['longer back', 'back'])
  })

  it('show one site alone when asked', () => {
    expect(Object.values(bandsOf(board, 'lower')).flat()).toEqual([])
  })

  it('count what is out, due today, and late', () => {
    expect(setsOut(board, '2026-01-16', null)).toEqual({ out: 2, dueToday: 1, late: 1 })
    expect(setsOut(board, '2026-01-16', 'lower')).toEqual({ out: 1, dueToday: 0, late: 1 })
  })

  it('count whole minutes, and none where a clock runs ahead', () => {
    expect(minutesBetween(at(10), new Date(at(21)))).toBe(11)
    expect(minutesBetween(at(22), new Date(at(21)))).toBe(0)
  })
})
