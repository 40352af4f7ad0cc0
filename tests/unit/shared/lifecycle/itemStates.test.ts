import { describe, expect, it } from 'vitest'
import { canMove, itemStates, lifecycleEdges, nextStates } from '#shared/lifecycle/itemStates'

describe('the life of a ski pair', () => {
  it('leads from the rack over the bench to the renter and back only through a check', () => {
    const day = ['racked', 'claimed', 'prepared', 'out', 'unchecked', 'racked'] as const
    for (let i = 1; i < day.length; i += 1) expect(canMove(day[i - 1]!, day[i]!)).toBe(true)
  })

  it('never leads from unchecked to a renter', () => {
    expect(nextStates('unchecked')).toEqual(['racked', 'service', 'withdrawn', 'quarantine'])
  })

  it('lets anything be held, and a held item only go to check, service or retirement', () => {
    for (const state of itemStates.filter((s) => s !== 'quarantine'))
      expect(canMove(state, 'quarantine')).toBe(true)
    expect(nextStates('quarantine')).toEqual(['unchecked', 'service', 'retired'])
  })

  it('ends at retired and sold', () => {
    expect(nextStates('retired')).toEqual(['quarantine'])
    expect(nextStates('sold')).toEqual(['quarantine'])
  })

  it('names every edge once', () => {
    const names = lifecycleEdges.map(({ from, to }) => `${from} ${to}`)
    expect(new Set(names).size).toBe(names.length)
  })
})
