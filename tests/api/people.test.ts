import { and, eq } from 'drizzle-orm'
import { beforeAll, describe, expect, test } from 'vitest'
import type { AnswerOf } from '#shared/api/define'
import {
  changePerson,
  createPerson,
  disablePerson,
  enablePerson,
  listColleagues,
  listPeople,
  setPasswordPath,
} from '#shared/api/people'
import { memberships, officeChanges, people } from '../../server/db/schema/schema'
import { addPerson } from '../support/people'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop
const row = async (personId: string, at = shop) => {
  const { body } = await at.as('manager').get<AnswerOf<typeof listPeople>>(listPeople.path)
  return body.rows.find(({ id }) => id === personId)
}
const runa = { name: 'Runa Hale', roles: ['counter' as const], locale: 'de' as const }
let made = 0
const email = () => `runa-${(made += 1)}@shop.test`

beforeAll(async () => {
  shop = await testShop()
})

describe('people of the shop', () => {
  test('a manager makes a person, gives a password, and the person signs in with their roles', async () => {
    const address = email()
    const { ids } = await shop.as('manager').send(createPerson, { ...runa, email: address })
    expect(await row(ids.personId)).toMatchObject({
      ...runa,
      email: address,
      hasPassword: false,
      hasPin: false,
    })
    const manager = await shop.agent('manager')
    const password = 'given at the desk'
    await manager.post(setPasswordPath).send({ personId: ids.personId, password }).expect(204)
    const answer = await shop.app.stranger().post('/api/session').send({ email: address, password })
    expect(answer.body).toMatchObject({ person: { name: runa.name, locale: 'de' }, roles: ['counter'] })
    expect((await row(ids.personId))?.hasPassword).toBe(true)
  })

  test('one e-mail is one person, however it is written', async () => {
    const address = email()
    await shop.as('manager').send(createPerson, { ...runa, email: address })
    const { code } = await shop.as('manager').send(createPerson, { ...runa, email: address.toUpperCase() })
    expect(code).toBe('people.email_taken')
    const { ids } = await shop.as('manager').send(createPerson, { ...runa, email: email() })
    const change = { personId: ids.personId, ...runa, email: address }
    expect((await shop.as('manager').send(changePerson, change)).code).toBe('people.email_taken')
  })

  test('a short password is refused, and a person without any role too', async () => {
    const manager = await shop.agent('manager')
    const personId = shop.people.second_counter.id
    const short = await manager.post(setPasswordPath).send({ personId, password: 'short' })
    expect(short.body.code).toBe('request.malformed')
    const none = await shop.as('manager').send(createPerson, { ...runa, roles: [], email: email() })
    expect(none.code).toBe('request.malformed')
  })

  test('who was disabled stays in the list, is no colleague, and comes back', async () => {
    const { personId } = await addPerson(shop.db, shop.id, ['counter'])
    const colleagues = async () =>
      (await shop.as('counter').get<AnswerOf<typeof listColleagues>>(listColleagues.path)).body.rows.map(
        ({ id }) => id,
      )
    expect(await colleagues()).toContain(personId)
    await shop.as('manager').send(disablePerson, { personId })
    expect((await row(personId))?.disabledAt).not.toBeNull()
    expect(await colleagues()).not.toContain(personId)
    await shop.as('manager').send(enablePerson, { personId })
    expect((await row(personId))?.disabledAt).toBeNull()
    expect(await colleagues()).toContain(personId)
  })

  test('each change is written down with the names of its fields and without their values', async () => {
    const address = email()
    const { ids } = await shop.as('manager').send(createPerson, { ...runa, email: address })
    await shop
      .as('manager')
      .send(changePerson, { personId: ids.personId, ...runa, name: 'Runa Holt', email: address })
    const changes = await shop.db
      .select()
      .from(officeChanges)
      .where(eq(officeChanges.subjectId, ids.personId))
    expect(changes.map(({ kind, fields }) => [kind, fields])).toEqual([
      ['people.create', ['name', 'email', 'roles', 'locale']],
      ['people.change', ['name']],
    ])
    expect(JSON.stringify(changes)).not.toMatch(/Runa|shop\.test/)
  })
})

/** The slower of two is refused, or no longer signed in when it is asked. */
const refusal = (answers: { code?: string }[]) =>
  answers.some(({ code }) => code === 'session.missing') ? 'session.missing' : 'people.last_manager'

describe('the last manager', () => {
  const only = async () => {
    const lone = await shop.another()
    return { lone, manager: lone.people.manager }
  }

  test('is neither disabled nor made something else', async () => {
    const { lone, manager } = await only()
    const body = { personId: manager.id, name: manager.name, email: manager.email, locale: 'en' as const }
    expect((await lone.as('manager').send(disablePerson, { personId: manager.id })).code).toBe(
      'people.last_manager',
    )
    const change = await lone.as('manager').send(changePerson, { ...body, roles: ['counter'] })
    expect(change.code).toBe('people.last_manager')
    expect(
      (await lone.as('manager').send(changePerson, { ...body, roles: ['manager', 'counter'] })).status,
    ).toBe(201)
  })

  test('a second one who cannot sign in yet, or was disabled, does not count', async () => {
    const { lone, manager } = await only()
    const { ids } = await lone
      .as('manager')
      .send(createPerson, { ...runa, roles: ['manager'], email: email() })
    expect((await lone.as('manager').send(disablePerson, { personId: manager.id })).code).toBe(
      'people.last_manager',
    )
    await (
      await lone.agent('manager')
    )
      .post(setPasswordPath)
      .send({ personId: ids.personId, password: 'given at the desk' })
    await lone.as('manager').send(disablePerson, { personId: ids.personId })
    expect((await lone.as('manager').send(disablePerson, { personId: manager.id })).code).toBe(
      'people.last_manager',
    )
  })

  test('of two managers who end each other in the same moment one is left', async () => {
    for (let round = 0; round < 5; round += 1) {
      const { lone, manager } = await only()
      const second = await addPerson(lone.db, lone.id, ['manager'])
      const answers = await Promise.all(
        [manager.id, second.personId].map((personId) => lone.as('manager').send(disablePerson, { personId })),
      )
      expect(answers.map(({ code }) => code ?? 'done').sort()).toEqual(['done', refusal(answers)])
      const left = await lone.db
        .select()
        .from(memberships)
        .where(and(eq(memberships.shopId, lone.id)))
      expect(
        left.filter(({ roles, endedAt }) => roles.includes('manager') && !endedAt).length,
      ).toBeGreaterThan(0)
    }
  })
})

describe('somebody who works for two shops', () => {
  test('is disabled in one and goes on in the other; their sign-in is neither shop’s to change', async () => {
    const elsewhere = await shop.another()
    const { personId, email: address } = await addPerson(shop.db, shop.id, ['counter'])
    await shop.db.insert(memberships).values({ shopId: elsewhere.id, personId, roles: ['technician'] })
    const manager = await shop.agent('manager')
    const password = await manager.post(setPasswordPath).send({ personId, password: 'mine from now on' })
    expect(password.body.code).toBe('people.other_shop')
    const renamed = {
      personId,
      name: 'Somebody Else',
      email: address,
      roles: ['counter' as const],
      locale: 'en' as const,
    }
    expect((await shop.as('manager').send(changePerson, renamed)).code).toBe('people.other_shop')
    const roles = { ...renamed, name: 'Somebody', roles: ['technician' as const] }
    expect((await shop.as('manager').send(changePerson, roles)).status).toBe(201)
    await shop.as('manager').send(disablePerson, { personId })
    expect((await row(personId, elsewhere))?.disabledAt).toBeNull()
    const [person] = await shop.db.select().from(people).where(eq(people.id, personId))
    expect(person!.disabledAt).toBeNull()
  })
})
