import { beforeAll, describe, expect, test } from 'vitest'
import { eq } from 'drizzle-orm'
import { changePerson, disablePerson, enablePerson } from '#shared/api/people'
import { session, shops } from '../../server/db/schema/schema'
import { Browser } from '../support/browser'
import { addPerson, addShop, addStaff, testPassword } from '../support/people'
import { testServer, type TestServer } from '../support/server'
import type { Role } from '#shared/permissions'

let on: TestServer
let shopId: string
let people: Awaited<ReturnType<typeof addStaff>>
let manager: Browser

const browser = (from?: string) => new Browser(on.server.url, from)

async function signedIn(email: string, from?: string): Promise<Browser> {
  const made = browser(from)
  const answer = await made.send('POST', '/api/session', { email, password: testPassword })
  expect(answer.status).toBe(201)
  return made
}

/** Somebody of the shop whom nobody else's test needs. */
async function somebody(...roles: Role[]) {
  const { personId, email } = await addPerson(on.database.db, shopId, roles)
  return { personId, email, at: await signedIn(email) }
}

const personOf = async (at: Browser) =>
  ((await at.get('/api/session')).body as { person?: { id: string } }).person?.id ?? null
const sessionsOf = (personId: string) =>
  on.database.db.select().from(session).where(eq(session.personId, personId))

beforeAll(async () => {
  on = await testServer()
  ;({ shopId } = await addShop(on.database.db))
  people = await addStaff(on.database.db, shopId)
  manager = await signedIn(people.manager.email)
})

describe('signing in', () => {
  test('brings a new session id: one that somebody planted before is worth nothing', async () => {
    const victim = browser()
    const thief = browser()
    await thief.send('POST', '/api/session', { email: people.counter.email, password: testPassword })
    const planted = thief.cookies.get('notchwise')!
    victim.cookies.set('notchwise', planted)
    await victim.send('POST', '/api/session', { email: people.technician.email, password: testPassword })
    expect(victim.cookies.get('notchwise')).not.toBe(planted)
    expect(await personOf(victim)).toBe(people.technician.id)
    expect(await personOf(thief)).toBeNull()
  })

  test('a session id that the server never gave out is not taken over', async () => {
    const victim = browser()
    victim.cookies.set('notchwise', 's%3Aplanted.c2lnbmF0dXJl')
    await victim.send('POST', '/api/session', { email: people.technician.email, password: testPassword })
    expect(victim.cookies.get('notchwise')).not.toContain('planted')
  })

  test('the cookie is out of reach of scripts and of other sites', async () => {
    const answer = await browser().send('POST', '/api/session', {
      email: people.counter.email,
      password: testPassword,
    })
    const [cookie] = answer.headers['set-cookie']!
    expect(cookie).toMatch(/HttpOnly/i)
    expect(cookie).toMatch(/SameSite=Lax/i)
  })

  test('tells the screens what the shop set: when an unfinished claim begins to age', async () => {
    await on.database.db.update(shops).set({ claimAgesMinutes: 45 }).where(eq(shops.id, shopId))
    expect((await manager.get('/api/session')).body).toMatchObject({
      shop: { id: shopId, claimAgesMinutes: 45 },
    })
  })

  test('an unknown person and a wrong password are answered alike', async () => {
    const wrong = await browser().send('POST', '/api/session', { email: people.counter.email, password: 'x' })
    const unknown = await browser().send('POST', '/api/session', { email: 'no@shop.test', password: 'x' })
    expect(wrong.status).toBe(401)
    expect(unknown.body).toEqual(wrong.body)
  })

  test('somebody to whom no password was given yet cannot sign in, with an empty one neither', async () => {
    const made = await manager.send('POST', '/api/people/create', {
      ...{
        id: crypto.randomUUID(),
        occurredAt: new Date().toISOString(),
        seenSeq: null,
        kind: 'people.create',
      },
      body: { name: 'Runa Hale', email: 'runa@shop.test', roles: ['counter'], locale: 'de' },
    })
    expect(made.status).toBe(201)
    for (const password of ['', ' ', 'nobody has this secret']) {
      const answer = await browser().send('POST', '/api/session', { email: 'runa@shop.test', password })
      expect([400, 401]).toContain(answer.status)
    }
  })
})

describe('the end of a session', () => {
  test('signing out ends it at once, for a copy of the cookie too', async () => {
    const { at } = await somebody('counter')
    const copy = browser()
    copy.cookies.set('notchwise', at.cookies.get('notchwise')!)
    expect((await at.send('DELETE', '/api/session')).status).toBe(204)
    expect((await copy.get('/api/board')).code).toBe('session.missing')
  })

  test('a disabled person is refused from the next request on and has no session left', async () => {
    const { at, personId, email } = await somebody('counter')
    expect((await at.get('/api/board')).status).toBe(200)
    expect((await manager.command(disablePerson, { personId })).status).toBe(201)
    expect((await at.get('/api/board')).status).toBe(401)
    expect(await sessionsOf(personId)).toEqual([])
    const again = await browser().send('POST', '/api/session', { email, password: testPassword })
    expect(again.code).toBe('session.wrong_credentials')
  })

  test('who is let in again signs in again', async () => {
    const { at, personId, email } = await somebody('counter')
    await manager.command(disablePerson, { personId })
    await manager.command(enablePerson, { personId })
    expect((await at.get('/api/board')).status).toBe(401)
    expect(await personOf(await signedIn(email))).toBe(personId)
  })

  test('a role that was taken away is gone with the next request', async () => {
    const { at, personId, email } = await somebody('head_technician', 'counter')
    const approval = { edition: 'eight-column', rulesVersion: 'none', comparedWith: 'the standard' }
    const envelope = () => ({
      ...{ id: crypto.randomUUID(), occurredAt: new Date().toISOString(), seenSeq: null },
      ...{ kind: 'tableEdition.approve', body: approval },
    })
    const before = await at.send('POST', '/api/table-edition/approve', envelope())
    expect(before.code).toBe('tableEdition.changed')
    await manager.command(changePerson, {
      personId,
      name: 'Somebody',
      email,
      roles: ['counter'],
      locale: 'en',
    })
    const after = await at.send('POST', '/api/table-edition/approve', envelope())
    expect([after.status, after.code]).toEqual([403, 'session.role'])
  })

  test('a new password from the manager ends what was open under the old one', async () => {
    const { at, personId, email } = await somebody('counter')
    const password = 'a password that is new'
    expect((await manager.send('POST', '/api/people/password', { personId, password })).status).toBe(204)
    expect((await at.get('/api/board')).status).toBe(401)
    expect((await browser().send('POST', '/api/session', { email, password: testPassword })).status).toBe(401)
    expect((await browser().send('POST', '/api/session', { email, password })).status).toBe(201)
  })

  test('of requests sent side by side with signing out none brings the session back', async () => {
    const { at, personId } = await somebody('counter')
    const cookie = { cookie: `notchwise=${at.cookies.get('notchwise')}` }
    const reads = Array.from({ length: 12 }, () => at.ask('GET', '/api/session', undefined, cookie))
    await Promise.all([...reads, at.ask('DELETE', '/api/session', undefined, cookie)])
    expect(await sessionsOf(personId)).toEqual([])
    expect((await at.ask('GET', '/api/board', undefined, cookie)).status).toBe(401)
  })

  test("a person's own new password keeps this screen and ends the others", async () => {
    const { at, email } = await somebody('counter')
    const elsewhere = await signedIn(email)
    const change = (password: string) =>
      at.send('POST', '/api/session/password', { password, newPassword: 'one of my very own' })
    expect((await change('not my password')).code).toBe('session.wrong_password')
    expect((await change(testPassword)).status).toBe(204)
    expect((await at.get('/api/board')).status).toBe(200)
    expect((await elsewhere.get('/api/board')).status).toBe(401)
  })
})

describe('where a change may come from', () => {
  const origins: [string, (url: URL) => string | undefined][] = [
    ['no origin', () => undefined],
    ['a foreign origin', () => 'http://elsewhere.test'],
    ['the origin of a page without one', () => 'null'],
    ['another port', (url) => `http://${url.hostname}:${Number(url.port) + 1}`],
    ['a longer name that begins with ours', (url) => `${url.origin}.elsewhere.test`],
    ['a longer name that ends with ours', (url) => `http://elsewhere-${url.host}`],
    ['our name as somebody else’s user', (url) => `http://${url.host}@elsewhere.test`],
    ['another scheme', (url) => `ftp://${url.host}`],
  ]

  test.each(origins)('%s is refused', async (_name, originOf) => {
    const { at } = await somebody('counter')
    const answer = await at.send('DELETE', '/api/session', undefined, {
      origin: originOf(new URL(on.server.url)),
    })
    expect([answer.status, answer.code]).toEqual([403, 'request.origin'])
    expect((await at.get('/api/board')).status).toBe(200)
  })

  test('a request without our own header, as a form would send it, is refused', async () => {
    const { at } = await somebody('counter')
    const answer = await at.send('DELETE', '/api/session', undefined, { 'x-notchwise': undefined })
    expect(answer.code).toBe('request.origin')
  })

  test.each(['text/plain', 'application/x-www-form-urlencoded', 'multipart/form-data; boundary=x'])(
    'a body as %s signs nobody in',
    async (type) => {
      const body = JSON.stringify({ email: people.counter.email, password: testPassword })
      const at = browser()
      const answer = await at.ask('POST', '/api/session', body, { 'content-type': type })
      expect(answer.status).toBe(400)
      expect(at.cookies.size).toBe(0)
    },
  )

  test('reading changes nothing: no route answers to GET that would', async () => {
    const { at } = await somebody('manager')
    for (const path of [
      '/api/people/create',
      '/api/session/switch',
      '/api/devices/revoke',
      '/api/shop/change',
    ]) {
      expect((await at.get(path)).status).toBe(404)
    }
  })
})

describe('what every answer carries', () => {
  test.each(['/api/session', '/api/nothing-here', '/livez'])(
    '%s: headers that keep foreign scripts out',
    async (p) => {
      const { headers } = await browser().get(p)
      const policy = String(headers['content-security-policy'])
      const scripts = policy.split(';').find((part) => part.trim().startsWith('script-src'))
      expect(scripts?.trim()).toBe("script-src 'self'")
      expect(policy).toContain("default-src 'self'")
      expect(policy).toContain("frame-ancestors 'none'")
      expect(policy).not.toContain('unsafe-eval')
      expect(headers['x-content-type-options']).toBe('nosniff')
      expect(headers['x-powered-by']).toBeUndefined()
    },
  )

  test('answers of the API are not kept by anybody on the way', async () => {
    expect((await browser().get('/api/session')).headers['cache-control']).toBe('no-store')
  })
})

describe('guessing', () => {
  const guess = (at: Browser, email: string, headers = {}) =>
    at.send('POST', '/api/session', { email, password: 'a wrong guess' }, headers)

  test('ten wrong passwords for an account stop the guesser, whatever a forwarding header claims', async () => {
    const { email } = await addPerson(on.database.db, shopId, ['counter'])
    const guesser = browser('127.0.0.9')
    const answers = []
    for (let n = 1; n <= 12; n += 1) {
      answers.push(
        await guess(guesser, email, { 'x-forwarded-for': `10.1.1.${n}`, forwarded: `for=10.1.1.${n}` }),
      )
    }
    expect(answers.slice(0, 10).every(({ status }) => status === 401)).toBe(true)
    expect(answers.slice(10).map(({ code }) => code)).toEqual(['request.too_many', 'request.too_many'])
    // written otherwise it is the same account
    expect((await guess(guesser, ` ${email.toUpperCase()}`)).status).toBe(429)
  })

  test('the owner at another place is not locked out by it, and another account neither', async () => {
    const { email } = await addPerson(on.database.db, shopId, ['counter'])
    const guesser = browser('127.0.0.10')
    for (let n = 1; n <= 11; n += 1) await guess(guesser, email)
    expect((await guess(guesser, email)).status).toBe(429)
    await signedIn(email, '127.0.0.11')
    await signedIn(people.second_counter.email, '127.0.0.10')
  })

  test('the own password cannot be guessed from a session that lies open', async () => {
    const { at } = await somebody('counter')
    const answers = []
    for (let n = 1; n <= 11; n += 1) {
      answers.push(await at.send('POST', '/api/session/pin', { password: `guess ${n}`, pin: '314417' }))
    }
    expect(answers[9]!.code).toBe('session.wrong_password')
    expect(answers[10]!.code).toBe('request.too_many')
  })

  test('a flood of sign-ins leaves the board answering', async () => {
    const { at } = await somebody('counter')
    const flood = Array.from({ length: 60 }, (_, n) => guess(browser('127.0.0.12'), `nobody-${n}@shop.test`))
    const started = Date.now()
    expect((await at.get('/api/board')).status).toBe(200)
    const took = Date.now() - started
    await Promise.all(flood)
    const all = Date.now() - started
    // 60 hashes take their time one behind the other; a read does not stand in that queue
    expect(took).toBeLessThan(all / 2)
  })
})
