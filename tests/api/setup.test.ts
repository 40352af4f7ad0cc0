import { beforeEach, describe, expect, test } from 'vitest'
import { setupCodes, shops, shopTexts } from '../../server/db/schema/schema'
import { openSetupCode } from '../../server/services/setup'
import { testApp, type TestApp } from '../support/app'

let app: TestApp
beforeEach(async () => {
  app = await testApp()
})

const first = {
  shopName: 'Fellgate Hire',
  zone: 'Europe/Vienna',
  siteName: 'Fellgate',
  name: 'Runa Hale',
  email: 'runa@shop.test',
  password: 'made on the first day',
  locale: 'de',
}
const setUp = (code: string, differs = {}) =>
  app
    .stranger()
    .post('/api/setup')
    .send({ ...first, code, ...differs })

describe('the first start of a real shop', () => {
  test('begins empty: nobody can sign in, and it says that it waits', async () => {
    expect((await app.stranger().get('/api/setup')).body).toEqual({ open: true })
    expect((await app.stranger().get('/api/session/demo')).body).toBeNull()
    const demo = await app
      .stranger()
      .post('/api/session')
      .send({ email: 'manager@tarnside.example', password: 'tarnside-manager' })
    expect(demo.status).toBe(401)
  })

  test('the code that the server printed makes shop, site, texts and manager, who is signed in', async () => {
    const code = await openSetupCode(app.deps)
    const answer = await setUp(code!)
    expect(answer.status).toBe(201)
    expect(answer.body).toMatchObject({
      person: { name: 'Runa Hale', locale: 'de' },
      shop: { name: 'Fellgate Hire', zone: 'Europe/Vienna', demo: false },
      sites: [{ name: 'Fellgate' }],
      roles: ['manager'],
    })
    const texts = await app.deps.db.select().from(shopTexts)
    expect(texts.map(({ locale, reviewedAt }) => [locale, reviewedAt]).sort()).toEqual([
      ['de', null],
      ['en', null],
    ])
  })

  test('the code is worth nothing the second time, and no other is made', async () => {
    const code = await openSetupCode(app.deps)
    await setUp(code!)
    expect((await setUp(code!, { email: 'second@shop.test' })).body.code).toBe('setup.closed')
    expect(await openSetupCode(app.deps)).toBeNull()
    expect((await app.stranger().get('/api/setup')).body).toEqual({ open: false })
    expect(await app.deps.db.$count(shops)).toBe(1)
  })

  test('two who have the code make one shop', async () => {
    const code = await openSetupCode(app.deps)
    const answers = await Promise.all([1, 2, 3].map((n) => setUp(code!, { email: `${n}@shop.test` })))
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409, 409])
    expect(await app.deps.db.$count(shops)).toBe(1)
  })

  test('a wrong code makes nothing, and a restart ends the code before', async () => {
    const old = await openSetupCode(app.deps)
    const code = await openSetupCode(app.deps)
    expect((await setUp('AAAAA-BBBBB-CCCCC-DDDDD')).body.code).toBe('setup.wrong_code')
    expect((await setUp(old!)).body.code).toBe('setup.wrong_code')
    expect(await app.deps.db.$count(shops)).toBe(0)
    // as it is read aloud: small letters, without dashes
    expect((await setUp(code!.replaceAll('-', ' ').toLowerCase())).status).toBe(201)
  })

  test('only the hash of the code is kept, and it is long enough not to be guessed', async () => {
    const code = (await openSetupCode(app.deps))!
    expect(code.replaceAll('-', '')).toMatch(/^[0-9A-F]{20}$/)
    const kept = JSON.stringify(await app.deps.db.select().from(setupCodes))
    expect(kept).not.toContain(code)
    expect(kept).not.toContain(code.replaceAll('-', ''))
  })

  test('thirty wrong codes from one address are the last', async () => {
    await openSetupCode(app.deps)
    const codes = []
    for (let n = 0; n < 31; n += 1) codes.push((await setUp(`WRONG-CODE-${n}`)).body.code)
    expect(codes.at(0)).toBe('setup.wrong_code')
    expect(codes.at(-1)).toBe('request.too_many')
  })

  test.each([
    ['a weak password', { password: 'short' }],
    ['a zone that is none', { zone: 'Nowhere' }],
    ['no name', { name: '' }],
  ])('%s is refused before the code is used', async (_name, slip) => {
    const code = await openSetupCode(app.deps)
    expect((await setUp(code!, slip)).body.code).toBe('request.malformed')
    expect((await setUp(code!)).status).toBe(201)
  })
})
