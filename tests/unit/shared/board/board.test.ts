import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import { applyEvent, boardFrom } from '#shared/board/board'
import type { BoardEvent, BoardItem, BoardSnapshot } from '#shared/schemas/board'

const at = '2026-01-16T10:42:00.000Z'
const empty: BoardSnapshot = { seq: 0, asOf: at, items: [], fittings: [], rentals: [], callBacks: 0 }

const pair = (id: string, state: BoardItem['state']): BoardItem => ({
  id,
  kind: 'ski_pair',
  code: 'S417',
  state,
  since: at,
  siteId: 'site',
  rackPlace: 'B 14',
  missing: [],
})

const event = (seq: number, ...items: BoardItem[]): BoardEvent => ({
  seq,
  kind: 'test',
  at,
  items,
  fittings: [],
  rentals: [],
})

describe('the live board', () => {
  it('shows an item in the state of the latest event', () => {
    const board = boardFrom({ ...empty, items: [pair('a', 'racked')] })
    const { board: after, gap } = applyEvent(board, event(1, pair('a', 'claimed')))
    expect(gap).toBe(false)
    expect(after.items.get('a')?.state).toBe('claimed')
    expect(after.seq).toBe(1)
  })

  it('is not changed by an event that it has already seen', () => {
    const board = { ...boardFrom(empty), seq: 5 }
    const { board: after } = applyEvent(board, event(5, pair('a', 'claimed')))
    expect(after).toBe(board)
  })

  it('says that something is missing instead of applying an event out of order', () => {
    const board = boardFrom(empty)
    const { board: after, gap } = applyEvent(board, event(2, pair('a', 'claimed')))
    expect(gap).toBe(true)
    expect(after).toBe(board)
  })

  it('lets a retired pair leave', () => {
    const board = boardFrom({ ...empty, items: [pair('a', 'racked')] })
    expect(applyEvent(board, event(1, pair('a', 'retired'))).board.items.has('a')).toBe(false)
  })

  it('keeps the number of open call-backs until an event changes it', () => {
    const board = boardFrom({ ...empty, callBacks: 2 })
    expect(applyEvent(board, event(1)).board.callBacks).toBe(2)
    expect(applyEvent(board, { ...event(1), callBacks: 0 }).board.callBacks).toBe(0)
  })

  it('ends up the same whatever is delivered twice', () => {
    const states = ['racked', 'claimed', 'prepared', 'out', 'unchecked', 'retired'] as const
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.constantFrom('a', 'b', 'c'), fc.constantFrom(...states)), { maxLength: 30 }),
        fc.array(fc.nat(29), { maxLength: 30 }),
        (changes, repeats) => {
          const events = changes.map(([id, state], index) => event(index + 1, pair(id, state)))
          const once = events.reduce((board, e) => applyEvent(board, e).board, boardFrom(empty))
          const again = events.reduce((board, e, index) => {
            const repeated = repeats[index] === undefined ? [] : events.slice(0, repeats[index])
            return [e, ...repeated].reduce((b, x) => applyEvent(b, x).board, board)
          }, boardFrom(empty))
          expect(again).toEqual(once)
        },
      ),
    )
  })
})
