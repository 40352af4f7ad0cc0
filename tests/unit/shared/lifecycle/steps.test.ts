import { describe, expect, it } from 'vitest'
import { canMove, itemStates } from '#shared/lifecycle/itemStates'
import { stepBetween, stepsFrom } from '#shared/lifecycle/steps'

describe('steps by hand', () => {
  it('are edges of the life cycle', () => {
    for (const from of itemStates) {
      for (const { to } of stepsFrom(from))
        expect(`${from} ${to} ${canMove(from, to)}`).toBe(`${from} ${to} true`)
    }
  })

  it('never give anything to a renter, clear a return, or end a hold', () => {
    for (const state of ['claimed', 'prepared', 'unchecked', 'quarantine', 'retired', 'sold'] as const) {
      expect(stepsFrom(state)).toEqual([])
    }
  })

  it('to retire or sell are a head technician’s, with a reason', () => {
    for (const from of ['racked', 'withdrawn'] as const) {
      for (const to of ['retired', 'sold'] as const) {
        expect(stepBetween(from, to)).toEqual({ to, permission: 'fleet.retire', needsReason: true })
      }
    }
    expect(stepBetween('out', 'retired')).toBeNull()
  })
})
