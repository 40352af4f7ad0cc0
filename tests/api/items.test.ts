import { eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import type { AnswerOf } from '#shared/api/define'
import {
  moveItem,
  openQuarantine,
  releaseQuarantine,
  replaceLabel,
  reviewQuarantine,
  undoMove,
  type listQuarantine,
  type lookUpLabel,
} from '#shared/api/items'
import { scanReturn } from '#shared/api/returns'
import { labelFor } from '#shared/labels/labels'
import { itemStates } from '#shared/lifecycle/itemStates'
import { stepsFrom, stepTargets, type StepTarget } from '#shared/lifecycle/steps'
import { may, roles } from '#shared/permissions'
import { bindingModels, boots as bootsTable, skiPairs } from '../../server/db/schema/schema'
import { preparedSet, setOut } from '../support/handOvers'
import type { Who } from '../support/people'
import { testShop, type TestShop } from '../support/shop'

type Found = AnswerOf<typeof lookUpLabel>

let shop: TestShop
beforeAll(async () => void (shop = await testShop()))

const lookUp = async (label: string, at = shop) =>
  (await at.as('counter').get<Found>('/api/lookup', { label })).body
const pairRef = (id: string) => ({ itemKind: 'ski_pair', itemId: id }) as const
const isPair = (id: string) => ({ kind: 'ski_pair', id }) as const
const stateOf = async (id: string) => (await shop.db.select().from(skiPairs).where(eq(skiPairs.id, id)))[0]!

describe('what a label is', () => {
  it('is answered for a scan and for typing, with and without check character, in small letters too', async () => {
    const pair = await shop.rackedPair()
    const boots = await shop.rackedBoots()
    const where = {
      found: true,
      itemKind: 'ski_pair',
      itemId: pair.id,
      code: pair.code,
      state: 'racked',
      site: 'Lower Lift',
    }
    expect(await lookUp(pair.skis.left.label)).toMatchObject({ ...where, side: 'left', fitting: null })
    expect(await lookUp(pair.skis.right.label.toLowerCase())).toMatchObject({ ...where, side: 'right' })
    expect(await lookUp(`${pair.code}l`)).toMatchObject({ ...where, side: 'left' })
    expect(await lookUp(pair.code)).toMatchObject({ ...where, side: null })
    expect(await lookUp(boots.labels.right)).toMatchObject({
      itemKind: 'boots',
      itemId: boots.id,
      side: 'right',
    })
  })

  it('says who has it, under which number, since when', async () => {
    const set = await preparedSet(shop)
    const found = await lookUp(set.pair.skis.left.label)
    expect(found).toMatchObject({
      state: 'prepared',
      fitting: {
        id: set.fittingId,
        rentalId: set.rental.id,
        state: 'prepared',
        by: shop.people.head_technician.name,
      },
    })
  })

  it('tells a misread from another shop’s, from one cut short, and from one that nobody made', async () => {
    const other = await shop.another()
    const theirs = await other.rackedPair()
    const wrong = theirs.skis.left.label.slice(0, -1) + (theirs.skis.left.label.endsWith('2') ? '3' : '2')
    expect(await lookUp(wrong)).toMatchObject({ found: false, why: 'check_character' })
    expect(await lookUp('4006381333931')).toMatchObject({ found: false, why: 'not_ours' })
    expect(await lookUp('S')).toMatchObject({ found: false, why: 'unfinished' })
    expect(await lookUp(labelFor('S55555', 'left'))).toMatchObject({ found: false, why: 'unknown' })
    const ours = await lookUp(theirs.skis.left.label)
    expect('itemId' in ours && ours.itemId).not.toBe(theirs.id)
  })

  it('of a label that was replaced says so, with what it was on; the new one is the ski', async () => {
    const pair = await shop.rackedPair()
    const replaced = await shop.as('manager').send(replaceLabel, { ...pairRef(pair.id), side: 'left' })
    expect(replaced.status).toBe(201)
    expect(await lookUp(pair.skis.left.label)).toEqual({
      found: false,
      why: 'replaced',
      code: `${pair.code}L`,
    })
    const { body } = await shop
      .as('counter')
      .get<{ labels: { text: string; side: string; until: string | null }[] }>(`/api/ski-pairs/${pair.id}`)
    expect(body.labels).toHaveLength(3)
    const now = body.labels.find(({ side, until }) => side === 'left' && until === null)!
    expect(now.text).not.toBe(pair.skis.left.label)
    expect(await lookUp(now.text)).toMatchObject({ found: true, itemId: pair.id, side: 'left' })
    expect(await lookUp(now.text.slice(0, -1))).toMatchObject({ found: true, itemId: pair.id, side: 'left' })
    expect(await lookUp(`${pair.code}L`)).toMatchObject({ found: true, itemId: pair.id, side: 'left' })
    expect(await lookUp(pair.skis.right.label)).toMatchObject({ found: true, side: 'right' })
  })

  it('nine labels of one ski can be lost; the tenth replacement is refused', async () => {
    const { id } = await shop.rackedBoots()
    const again = () =>
      shop.as('manager').send(replaceLabel, { itemKind: 'boots', itemId: id, side: 'right' })
    for (let lost = 0; lost < 9; lost += 1) expect((await again()).status).toBe(201)
    expect((await again()).code).toBe('labels.taken')
  })

  it.each(roles)('%s: a new label is for head technician and manager', async (role) => {
    const { id } = await shop.rackedPair()
    const answer = await shop.as(role).send(replaceLabel, { ...pairRef(id), side: 'left' })
    expect(answer.status).toBe(may([role], 'fleet.write') ? 201 : 403)
  })
})

describe('steps by hand', () => {
  const inState: Partial<Record<string, () => Promise<string>>> = {
    commissioning: async () => (await shop.newPair()).id,
    racked: async () => (await shop.rackedPair()).id,
    out: async () => (await setOut(shop)).pair.id,
    service: () => walk('service'),
    withdrawn: () => walk('unchecked', 'withdrawn'),
    lost: async () => {
      const { pair } = await setOut(shop)
      await shop.change(isPair(pair.id), 'out', 'lost')
      return pair.id
    },
    unchecked: () => walk('unchecked'),
    retired: () => walk('retired'),
    claimed: async () => {
      const pair = await shop.rackedPair()
      await shop.fitting({ rental: await shop.rental(), pair, boots: await shop.rackedBoots() })
      return pair.id
    },
    prepared: async () => (await preparedSet(shop)).pair.id,
  }
  async function walk(...states: ('service' | 'unchecked' | 'withdrawn' | 'retired')[]) {
    const { id } = await shop.rackedPair()
    for (const [index, to] of states.entries()) {
      await shop.change(isPair(id), states[index - 1] ?? 'racked', to)
    }
    return id
  }
  const move = (who: Who, id: string, to: StepTarget, more: { reason?: string; rackPlace?: string } = {}) =>
    shop.as(who).send(moveItem, { ...pairRef(id), to, rackPlace: 'A 1', reason: 'Edge is loose', ...more })

  for (const from of itemStates.filter((state) => inState[state])) {
    it(`from ${from}: each role takes its own and no other`, async () => {
      for (const to of stepTargets) {
        const step = stepsFrom(from).find((each) => each.to === to)
        if (!step) {
          const id = await inState[from]!()
          const answer = await move('head_technician', id, to)
          expect([to, answer.status, answer.code]).toEqual([to, 409, 'items.state'])
          continue
        }
        for (const role of roles) {
          const id = await inState[from]!()
          const answer = await move(role, id, to)
          expect([to, role, answer.status]).toEqual([to, role, may([role], step.permission) ? 201 : 403])
          expect((await stateOf(id)).state).toBe(may([role], step.permission) ? to : from)
        }
      }
    })
  }

  it('that are not routine need a reason; a place on the rack needs its name', async () => {
    const racked = await inState.racked!()
    expect((await move('technician', racked, 'service', { reason: '' })).code).toBe('items.reason')
    expect((await move('head_technician', racked, 'retired', { reason: '' })).code).toBe('items.reason')
    const made = await shop.newPair()
    expect((await move('head_technician', made.id, 'racked', { rackPlace: '' })).code).toBe(
      'items.rack_place',
    )
    expect((await move('head_technician', made.id, 'racked', { reason: '', rackPlace: 'C 4' })).status).toBe(
      201,
    )
    expect(await stateOf(made.id)).toMatchObject({ state: 'racked', rackPlace: 'C 4' })
  })

  it('rack no pair whose binding model nobody approved', async () => {
    const other = await shop.another()
    const pair = await other.newPair()
    await other.db
      .update(bindingModels)
      .set({ manualPage: '99' })
      .where(eq(bindingModels.id, pair.bindingModelId))
    const answer = await other
      .as('head_technician')
      .send(moveItem, { ...pairRef(pair.id), to: 'racked', rackPlace: 'A 1', reason: '' })
    expect([answer.status, answer.code]).toEqual([409, 'models.not_approved'])
  })

  it('are taken back by whoever may take them, once, and only the latest', async () => {
    const { id } = await shop.rackedPair()
    const toService = await move('technician', id, 'service')
    const undo = (who: Who, changeId: string) => shop.as(who).send(undoMove, { ...pairRef(id), changeId })
    expect((await undo('counter', toService.ids.changeId)).code).toBe('session.role')
    const toUnchecked = await move('technician', id, 'unchecked')
    expect((await undo('technician', toService.ids.changeId)).code).toBe('items.state')
    expect((await undo('technician', toUnchecked.ids.changeId)).status).toBe(201)
    expect((await stateOf(id)).state).toBe('service')
    expect((await undo('technician', toUnchecked.ids.changeId)).status).toBe(409)
  })

  it('of another shop’s pair are of an unknown one', async () => {
    const other = await shop.another()
    const { id } = await other.rackedPair()
    expect((await move('head_technician', id, 'service')).code).toBe('items.unknown')
    expect((await shop.as('manager').send(replaceLabel, { ...pairRef(id), side: 'left' })).code).toBe(
      'items.unknown',
    )
  })
})

describe('a hold', () => {
  const open = (who: Who, id: string, more: { ownerId?: string; reviewOn?: string } = {}) =>
    shop.as(who).send(openQuarantine, {
      ...pairRef(id),
      reason: 'The renter fell, the heel did not open',
      ownerId: shop.people.head_technician.id,
      reviewOn: '2030-01-31',
      ...more,
    })
  const holds = async () =>
    (await shop.as('counter').get<AnswerOf<typeof listQuarantine>>('/api/quarantine')).body

  it.each(roles)('%s: anybody opens one; only a head technician reviews and releases it', async (role) => {
    const { id } = await shop.rackedPair()
    const opened = await open(role, id)
    expect(opened.status).toBe(201)
    expect((await stateOf(id)).state).toBe('quarantine')
    const { quarantineId } = opened.ids
    const head = role === 'head_technician' ? 201 : 403
    const review = { quarantineId, ownerId: shop.people.manager.id, reviewOn: '2030-02-01' }
    expect((await shop.as(role).send(reviewQuarantine, review)).status).toBe(head)
    const release = { quarantineId, to: 'service' as const, reason: 'Tested, heel replaced' }
    expect((await shop.as(role).send(releaseQuarantine, release)).status).toBe(head)
    expect((await stateOf(id)).state).toBe(role === 'head_technician' ? 'service' : 'quarantine')
  })

  it('is listed with reason, owner and review date, what is due first, what ended last', async () => {
    const [late, soon, over] = [await shop.rackedPair(), await shop.rackedPair(), await shop.rackedPair()]
    await open('counter', late.id, { reviewOn: '2031-01-01' })
    await open('counter', soon.id, { reviewOn: '2029-01-01' })
    const ended = await open('counter', over.id, { reviewOn: '2028-01-01' })
    const to = { quarantineId: ended.ids.quarantineId, to: 'unchecked' as const, reason: 'Nothing found' }
    await shop.as('head_technician').send(releaseQuarantine, to)
    const { rows, owners } = await holds()
    const at = (code: string) => rows.findIndex((row) => row.code === code)
    expect(at(soon.code)).toBeLessThan(at(late.code))
    expect(at(late.code)).toBeLessThan(at(over.code))
    expect(rows[at(over.code)]).toMatchObject({ releasedTo: 'unchecked', releaseReason: 'Nothing found' })
    expect(owners.map(({ name }) => name)).toContain(shop.people.head_technician.name)
  })

  it('needs a reason, an owner of this shop and a day that is still to come', async () => {
    const { id } = await shop.rackedPair()
    const other = await shop.another()
    expect((await open('counter', id, { ownerId: other.people.manager.id })).code).toBe('items.unknown')
    expect((await open('counter', id, { reviewOn: '2020-01-01' })).code).toBe('quarantine.review_day')
    const none = await shop.as('counter').send(openQuarantine, {
      ...pairRef(id),
      reason: ' ',
      ownerId: shop.people.manager.id,
      reviewOn: '2030-01-31',
    })
    expect(none.status).toBe(400)
    expect((await open('counter', id)).status).toBe(201)
    expect((await open('technician', id)).code).toBe('quarantine.open')
  })

  it('releases once, and another shop’s is unknown', async () => {
    const { id } = await shop.rackedPair()
    const { quarantineId } = (await open('counter', id)).ids
    const release = { quarantineId, to: 'retired' as const, reason: 'Bent toe unit' }
    const other = await shop.another()
    expect((await other.as('head_technician').send(releaseQuarantine, release)).code).toBe('items.unknown')
    expect((await shop.as('head_technician').send(releaseQuarantine, release)).status).toBe(201)
    expect((await shop.as('second_head_technician').send(releaseQuarantine, release)).code).toBe(
      'quarantine.release',
    )
  })

  it('of boots that are out keeps them held when they come back', async () => {
    const set = await setOut(shop)
    const held = await shop.as('counter').send(openQuarantine, {
      itemKind: 'boots',
      itemId: set.boots!.id,
      reason: 'Sole broken, says the renter by phone',
      ownerId: shop.people.head_technician.id,
      reviewOn: '2030-01-31',
    })
    expect(held.status).toBe(201)
    const back = await shop.as('counter').send(scanReturn, { text: set.boots!.labels.left })
    expect(back.status).toBe(201)
    const [row] = await shop.db.select().from(bootsTable).where(eq(bootsTable.id, set.boots!.id))
    expect(row!.state).toBe('quarantine')
  })
})
