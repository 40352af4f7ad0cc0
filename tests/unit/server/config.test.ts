import { describe, expect, it } from 'vitest'
import { isLoopback, readConfig } from '../../../server/config'

describe('what a start is told', () => {
  it('is nothing: the demo shop, for this machine alone', () => {
    expect(readConfig({}, [])).toMatchObject({
      host: '127.0.0.1',
      port: 4310,
      demo: true,
      database: 'notchwise_demo',
      logLevel: 'warn',
      lost: [],
    })
  })

  it('is --real: a shop of one’s own, in a database of its own', () => {
    expect(readConfig({}, ['--real'])).toMatchObject({ demo: false, database: 'notchwise_shop' })
  })

  it('never is the demo shop beyond this machine', () => {
    const config = readConfig({ HOST: '0.0.0.0', PLAIN_HTTP: '1' }, [])
    expect(config).toMatchObject({ demo: false, database: 'notchwise_shop' })
    expect(config.lost).toContain('camera scanning')
  })

  it('refuses other machines without TLS, unless it is told that this is known', () => {
    expect(() => readConfig({ HOST: '0.0.0.0' }, [])).toThrow(/PLAIN_HTTP=1/)
    expect(() => readConfig({ HOST: '192.168.1.20', PLAIN_HTTP: '0' }, [])).toThrow(/PLAIN_HTTP=1/)
  })

  it.each([
    [{ DATABASE_URL: 'postgres://x' }, /Unset it/],
    [{ PORT: '80x' }, /PORT is 80x/],
    [{ PORT: '65536' }, /PORT is 65536/],
    [{ PORT: '-1' }, /PORT is -1/],
    [{ PORT: '4.5' }, /PORT is 4.5/],
    [{ LOG_LEVEL: 'loud' }, /LOG_LEVEL is loud/],
  ])('refuses %o in words', (env, words) => {
    expect(() => readConfig(env, [])).toThrow(words)
  })

  it('refuses a word that it does not know, instead of passing over it', () => {
    expect(() => readConfig({}, ['--reel'])).toThrow(/Unknown: --reel/)
  })
})

describe('an address that only this machine reaches', () => {
  it.each(['127.0.0.1', '127.8.9.1', 'localhost', '::1'])('is %s', (host) => {
    expect(isLoopback(host)).toBe(true)
  })

  it.each(['0.0.0.0', '::', '10.127.0.0', '127.0.0.1.example.org', '1127.0.0.1', 'localhost.example.org'])(
    'is not %s',
    (host) => {
      expect(isLoopback(host)).toBe(false)
    },
  )
})
