import { randomBytes, randomUUID } from 'node:crypto'
import type supertest from 'supertest'
import { addDays, dayInZone } from '#shared/dates/days'
import type { RenterForm } from '#shared/schemas/renters'

/** A secret as a phone or the desk makes it. */
export const newToken = () => randomBytes(20).toString('base64url')

/** The shop's day, in the zone of the tests' shops. */
export const today = () => dayInZone(new Date(), 'Europe/Vienna')

/** An invented renter's whole form, a grown-up's for two days from today. */
export function filledForm(values: Partial<RenterForm> = {}): RenterForm {
  return {
    firstName: 'Orla',
    lastName: 'Fenn',
    email: 'orla@renter.test',
    phone: '+43 000 288 417',
    locale: 'en',
    birthDate: null,
    age: 34,
    guardian: null,
    mass: { unit: 'st-lb', stone: 11, pounds: 3 },
    height: { unit: 'ft-in', feet: 5, inches: 9 },
    skierType: 'II',
    shoe: { size: '42', system: 'eu' },
    ownBoots: false,
    wishes: '',
    startsOn: today(),
    endsOn: addDays(today(), 1),
    ...values,
  }
}

/** What a renter's phone does: it has a link and no session. */
export function phone(stranger: () => ReturnType<typeof supertest.agent>, link: string) {
  const agent = stranger()
  return {
    begin: (door: string) => agent.post('/api/forms/begin').send({ door, token: link }),
    form: () => agent.get('/api/forms/mine').set('x-renter-link', link),
    save: (version: number, draft: Record<string, string>) =>
      agent.put('/api/forms/mine').set('x-renter-link', link).send({ version, draft }),
    submit: (form: unknown, id = randomUUID()) =>
      agent
        .post('/api/forms/submit')
        .set('x-renter-link', link)
        .send({ id, occurredAt: new Date().toISOString(), seenSeq: null, kind: 'forms.submit', body: form }),
  }
}
