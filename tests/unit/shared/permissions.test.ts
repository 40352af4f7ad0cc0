import { describe, expect, it } from 'vitest'
import { may, permissionsOf } from '#shared/permissions'

describe('who may do what', () => {
  it('lets everybody take in a return and nobody but the workshop clear it', () => {
    expect(may(['counter'], 'returns.record')).toBe(true)
    expect(may(['counter'], 'returns.clear')).toBe(false)
    expect(may(['manager'], 'returns.clear')).toBe(false)
    expect(may(['technician'], 'returns.clear')).toBe(true)
  })

  it('leaves decisions and approvals to the head technician', () => {
    for (const permission of [
      'fittings.decide',
      'bindingModels.approve',
      'tableEdition.approve',
      'quarantine.release',
    ] as const) {
      expect(may(['head_technician'], permission)).toBe(true)
      expect(may(['manager', 'technician', 'counter'], permission)).toBe(false)
    }
  })

  it('adds up what several roles allow', () => {
    expect(permissionsOf(['counter', 'manager'])).toContain('people.manage')
    expect(permissionsOf(['counter'])).not.toContain('people.manage')
  })
})
