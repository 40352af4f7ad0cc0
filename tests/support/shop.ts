import { randomUUID } from 'node:crypto'
import { eq } from 'drizzle-orm'
import type supertest from 'supertest'
import type { Command } from '#shared/api/define'
import type { ProblemCode, ProblemParams } from '#shared/errors'
import { RULES_VERSION } from '#shared/release/rules'
import { deviceCookie, pinHeader } from '../../server/auth/actors'
import { shopTexts, tableApprovals } from '../../server/db/schema/schema'
import { testApp, type TestApp } from './app'
import { textLocales } from '#shared/api/shop'
import { productText } from '../../server/services/defaultTexts'
import { textSha256 } from '../../server/services/texts'
import { addShop, addStaff, enrolDevice, testPassword, type Who } from './people'
import { addFitting, addRental, type RentalValues, type TestRental } from './rentals'
import {
  addBindingModel,
  addBoots,
  addHold,
  addPair,
  addSkiModel,
  addStateChange,
  type BootsValues,
  type PairValues,
  type TestBoots,
  type TestPair,
  type Track,
} from './things'

/** What came back of a command or a read; `ids` of a command that took effect, `code` of a refusal. */
export interface Answered<Ids = unknown> {
  status: number
  ids: Ids
  seq: number | null
  code: ProblemCode | undefined
  params: ProblemParams
  // a test looks into answers of every shape
  body: Record<string, unknown>
}

export interface Person {
  /** Sends a command in a fresh envelope, or in the one given. */
  send: <Body, Ids>(
    command: Command<string, Body, Ids>,
    body: NoInfer<Body>,
    options?: { pin?: string; envelope?: { id?: string; occurredAt?: string } },
  ) => Promise<Answered<Ids>>
  get: <Answer = Record<string, unknown>>(
    path: string,
    query?: Record<string, string | number>,
  ) => Promise<{ status: number; code: ProblemCode | undefined; body: Answer }>
}

export type TestShop = Awaited<ReturnType<typeof shopIn>>

/** A shop with two sites and its staff in a database of its own, driven through the real application. */
export async function testShop(): Promise<TestShop> {
  return shopIn(await testApp(), 'Tarnside Hire')
}

/** One more shop in the same database; its ids are another shop's to the first. */
export async function shopIn(app: TestApp, name: string) {
  const { db } = app.database
  const { shopId, siteIds } = await addShop(db, name)
  const people = await addStaff(db, shopId)
  await signTexts(db, shopId, people.manager.id)
  const inShop = { shopId, siteId: siteIds[0], personId: people.head_technician.id }
  const makes = makers(db, inShop)

  const signedIn = new Map<string, Promise<ReturnType<typeof supertest.agent>>>()
  const signIn = async (who: Who, device?: { token: string }) => {
    const agent = app.stranger()
    if (device) agent.set('cookie', `${deviceCookie}=${device.token}`)
    const { email } = people[who]
    const answer = await agent.post('/api/session').send({ email, password: testPassword })
    if (answer.status !== 201) throw new Error(`${who} could not sign in: ${answer.status} ${answer.text}`)
    if (device) {
      const session = answer.headers['set-cookie'] as unknown as string[]
      agent.set(
        'cookie',
        [`${deviceCookie}=${device.token}`, ...session.map((c) => c.split(';')[0])].join('; '),
      )
    }
    return agent
  }
  const agentOf = (who: Who, device?: { id: string; token: string }) => {
    const key = `${who} ${device?.id ?? ''}`
    const known = signedIn.get(key) ?? signIn(who, device)
    signedIn.set(key, known)
    return known
  }

  return {
    ...makes,
    app,
    db,
    id: shopId,
    sites: { lower: siteIds[0], square: siteIds[1] },
    people,
    inShop,
    /** Somebody of the staff at a browser, or at an enrolled device. */
    as: (who: Who, device?: { id: string; token: string }): Person => person(() => agentOf(who, device)),
    /** The signed-in supertest agent itself, for requests that are neither command nor read. */
    agent: agentOf,
    stranger: (): Person => person(() => Promise.resolve(app.stranger())),
    enrol: (station: string, siteId: string = siteIds[0]) =>
      enrolDevice(db, { shopId, siteId, station, enrolledBy: people.manager.id }),
    another: () => shopIn(app, 'Other Hire'),
    /** The head technician signs the table edition. */
    approveTable: async () =>
      void (await db.insert(tableApprovals).values({
        shopId,
        edition: 'eight-column',
        rulesVersion: RULES_VERSION,
        comparedWith: 'the standard that the shop owns (invented)',
        approved: true,
        personId: people.head_technician.id,
        occurredAt: new Date(),
      })),
  }
}

/** The manager read the shop's texts and signed them; a real shop hands nothing over before. */
async function signTexts(db: TestApp['database']['db'], shopId: string, personId: string) {
  const reviewed = { reviewedBy: personId, reviewedAt: new Date() }
  await db.update(shopTexts).set(reviewed).where(eq(shopTexts.shopId, shopId))
  const sentences = textLocales.map((locale) => {
    const body = productText('skier_types', locale)
    return { shopId, kind: 'skier_types', locale, version: 1, body, sha256: textSha256(body), ...reviewed }
  })
  await db.insert(shopTexts).values(sentences)
}

function person(agentOf: () => Promise<ReturnType<typeof supertest.agent>>): Person {
  return {
    async send(command, body, { pin, envelope } = {}) {
      const agent = await agentOf()
      const request = agent.post(command.path)
      if (pin) void request.set(pinHeader, pin)
      const answer = await request.send({
        id: envelope?.id ?? randomUUID(),
        occurredAt: envelope?.occurredAt ?? new Date().toISOString(),
        seenSeq: null,
        kind: command.kind,
        body,
      })
      const { ids, seq = null, code, params = {} } = answer.body
      return { status: answer.status, ids, seq, code, params, body: answer.body }
    },
    async get(path, query = {}) {
      const agent = await agentOf()
      const answer = await agent.get(path).query(query)
      return { status: answer.status, code: answer.body?.code, body: answer.body }
    },
  }
}

/** Makes things of the shop straight in the database, as the server's role may. */
function makers(db: TestApp['database']['db'], shop: { shopId: string; siteId: string; personId: string }) {
  const bindings = new Map<Track, Promise<string>>()
  let skiModel: Promise<string> | undefined
  let number = 100
  const next = () => (number += 1)
  /** The approved binding model of a track, made once. */
  const bindingModel = (track: Track) => {
    const known = bindings.get(track) ?? addBindingModel(db, shop, track)
    bindings.set(track, known)
    return known
  }
  const anySkiModel = () => (skiModel ??= addSkiModel(db, shop.shopId, 'Fellwind 74'))

  const newPair = async (track: Track = 'ladder-16', values: PairValues = {}): Promise<TestPair> =>
    addPair(
      db,
      { ...shop, skiModelId: await anySkiModel(), bindingModelId: await bindingModel(track), number: next() },
      values,
    )
  const newBoots = (values: BootsValues = {}): Promise<TestBoots> =>
    addBoots(db, { ...shop, number: next() }, values)

  return {
    bindingModel,
    skiModel: anySkiModel,
    /** A pair that nobody has racked yet. */
    newPair,
    newBoots,
    /** A pair in its rack place, both skis standing at a preset. */
    async rackedPair(track: Track = 'ladder-16', values: PairValues = {}): Promise<TestPair> {
      const rackPlace = values.rackPlace ?? `A ${number + 1}`
      const pair = await newPair(track, { preset: { toe: 5, heel: 5 }, ...values, rackPlace })
      await addStateChange(db, shop, { kind: 'ski_pair', id: pair.id }, 'commissioning', 'racked', {
        rackPlace,
      })
      return pair
    },
    async rackedBoots(values: BootsValues = {}): Promise<TestBoots> {
      const rackPlace = values.rackPlace ?? `K ${number + 1}`
      const made = await newBoots({ ...values, rackPlace })
      await addStateChange(db, shop, { kind: 'boots', id: made.id }, 'commissioning', 'racked', { rackPlace })
      return made
    },
    rental: (values: RentalValues = {}): Promise<TestRental> =>
      addRental(db, { ...shop, number: next() }, values),
    fitting: (of: Parameters<typeof addFitting>[2]) => addFitting(db, shop, of),
    hold: (item: { kind: 'ski_pair' | 'boots'; id: string }, from: Parameters<typeof addHold>[3]) =>
      addHold(db, shop, item, from),
    change: (
      item: { kind: 'ski_pair' | 'boots'; id: string },
      from: Parameters<typeof addStateChange>[3],
      to: Parameters<typeof addStateChange>[4],
      more?: Parameters<typeof addStateChange>[5],
    ) => addStateChange(db, shop, item, from, to, more),
  }
}
