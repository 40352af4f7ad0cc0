import { describe, expect, it } from 'vitest'
import { homesOf } from '../../../src/router/home'
import { safePath } from '../../../src/router/safePath'

const bench = { id: 'd', name: 'Bench 2', station: 'bench', siteId: 's' }

describe('where the day begins', () => {
  it('at the place of the device, whoever signs in there', () => {
    expect(homesOf({ device: bench, roles: ['counter'] })[0]).toBe('bench')
  })

  it('at what the role is for where the device is of no place', () => {
    expect(homesOf({ device: null, roles: ['counter'] })[0]).toBe('counter')
    expect(homesOf({ device: null, roles: ['technician'] })[0]).toBe('bench')
    expect(homesOf({ device: null, roles: ['head_technician'] })[0]).toBe('bench')
    expect(homesOf({ device: null, roles: ['manager'] })[0]).toBe('board')
  })
})

describe('where a sign-in leads', () => {
  it('back to the page that was wanted', () => {
    expect(safePath('/counter/rentals/1?tab=why#value')).toBe('/counter/rentals/1?tab=why#value')
  })

  it.each([
    '//elsewhere.example/x',
    'https://elsewhere.example',
    '/\\elsewhere.example',
    'javascript:alert(1)',
    null,
    ['a'],
  ])('never to another address: %s', (next) => {
    expect(safePath(next)).toBe('/')
  })
})
