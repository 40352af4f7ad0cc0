import { randomUUID } from 'node:crypto'
import { Writable } from 'node:stream'
import pg from 'pg'
import supertest from 'supertest'
import { beforeAll, describe, expect, test } from 'vitest'
import { createPerson, setPasswordPath } from '#shared/api/people'
import { deviceCookie, linkHeader, pinHeader } from '../../server/auth/actors'
import { createApp } from '../../server/app'
import { createLog } from '../../server/log'
import { testApp, testOrigin, type TestApp } from '../support/app'
import { addShop, addStaff, enrolDevice, testPassword } from '../support/people'

/** What nobody may ever find in a log: each of them is sent, the right way and the wrong way. */
const planted = {
  password: 'planted-password-417',
  wrongPassword: 'planted-wrong-password',
  pin: '804417',
  wrongPin: '904417',
  token: 'planted-token-0000000000000000',
  name: 'Plantedname Hale',
  email: 'plantedmail@shop.test',
}

let app: TestApp
let lines = ''
let agent: ReturnType<typeof supertest.agent>
let people: Awaited<ReturnType<typeof addStaff>>
let deviceToken: string

beforeAll(async () => {
  app = await testApp()
  const { shopId, siteIds } = await addShop(app.database.db)
  people = await addStaff(app.database.db, shopId)
  const at = { shopId, siteId: siteIds[0], station: 'bench', enrolledBy: people.manager.id }
  deviceToken = (await enrolDevice(app.database.db, at)).token
  const log = createLog(
    'trace',
    new Writable({
      write: (chunk: Buffer, _encoding, done) => {
        lines += chunk.toString()
        done()
      },
    }),
  )
  const { express } = createApp({ ...app.deps, log })
  agent = supertest.agent(express).set({ origin: testOrigin, 'x-notchwise': '1' }) as typeof agent
  await agent.post('/api/session').send({ email: people.manager.email, password: testPassword }).expect(201)
})

const create = (name: string) => ({
  ...{ id: randomUUID(), occurredAt: new Date().toISOString(), seenSeq: null, kind: createPerson.kind },
  body: { name, email: planted.email, roles: ['counter'], locale: 'en' },
})

/** The secrets of this run that the server itself made. */
function everySecret() {
  return { ...planted, deviceToken, testPassword }
}

function expectSilence() {
  for (const [what, secret] of Object.entries(everySecret()))
    expect([what, lines.includes(secret)]).toEqual([what, false])
}

describe('the log', () => {
  test('tells that requests came, and neither password nor PIN nor token nor name', async () => {
    const made = await agent.post(createPerson.path).send(create(planted.name)).expect(201)
    await agent
      .post(setPasswordPath)
      .send({ personId: made.body.ids.personId, password: planted.password })
      .expect(204)
    await agent
      .post('/api/session')
      .send({ email: planted.email, password: planted.wrongPassword })
      .expect(401)
    await agent.post('/api/session/pin').send({ password: testPassword, pin: planted.pin }).expect(204)
    await agent
      .post('/api/session/switch')
      .set('cookie', `${deviceCookie}=${deviceToken}`)
      .send({ personId: people.manager.id, pin: planted.wrongPin })
      .expect(403)
    await agent.post(createPerson.path).set(pinHeader, planted.pin).send({ name: planted.name }).expect(400)
    await agent.get(`/api/forms/mine?token=${planted.token}`).set(linkHeader, planted.token).expect(404)
    await agent.post(`/api/nothing?name=${planted.name}`).send({ password: planted.password }).expect(404)
    await agent
      .post('/api/session')
      .set('content-type', 'application/json')
      .send(`{"password": "${planted.password}"`)
      .expect(400)
    expect(lines).toContain('/api/people/create')
    expect(lines).toContain('/api/session/switch')
    expectSilence()
  })

  test('tells of a fault what went wrong and not whom it was about', async () => {
    const owner = new pg.Client({ connectionString: app.database.ownerUrl })
    await owner.connect()
    await owner.query(
      `alter table people add constraint nobody_new check (name <> '${planted.name} Two') not valid`,
    )
    await owner.end()
    const answer = await agent.post(createPerson.path).send({
      ...create(`${planted.name} Two`),
      body: { ...create('').body, name: `${planted.name} Two`, email: `two-${planted.email}` },
    })
    expect(answer.body.code).toBe('server.fault')
    expect(JSON.stringify(answer.body)).not.toContain(planted.name)
    expect(lines).toContain('nobody_new')
    expect(lines).toContain('insert into \\"people\\"')
    expectSilence()
  })
})
