import { eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import { changeBoots, createBoots, type BootsRow } from '#shared/api/boots'
import { changeSkiPair, createSkiPair, readPreset, type SkiPairRow } from '#shared/api/skiPairs'
import type { getSkiPair } from '#shared/api/skiPairs'
import type { AnswerOf } from '#shared/api/define'
import { saveSkiModel } from '#shared/api/models'
import { roles } from '#shared/permissions'
import { soleRangeAt } from '#shared/track/trackPlan'
import { callBacks, fittings, officeChanges, presetChanges } from '../../server/db/schema/schema'
import { preparedSet, setOut } from '../support/handOvers'
import type { Who } from '../support/people'
import { testShop, type TestShop } from '../support/shop'
import { addSkiModel } from '../support/things'

type Pair = AnswerOf<typeof getSkiPair>

let shop: TestShop
beforeAll(async () => void (shop = await testShop()))

const pairBody = async (values: Partial<Parameters<typeof asPair>[0]> = {}) => asPair(values)
async function asPair(values: {
  code?: string
  lengthCm?: number
  rackPlace?: string
  skiModelId?: string
  bindingModelId?: string
  homeSiteId?: string
}) {
  return {
    code: 'S900',
    skiModelId: await shop.skiModel(),
    bindingModelId: await shop.bindingModel('ladder-16'),
    lengthCm: 163,
    season: 2025,
    homeSiteId: shop.sites.lower,
    rackPlace: '',
    ...values,
  }
}
const bootsBody = (values: object = {}) => ({
  code: 'B900',
  model: 'Tarn 90',
  mondo: 265,
  soleLengthMm: 305,
  soleType: 'ISO 5355 A' as const,
  season: 2025,
  homeSiteId: shop.sites.lower,
  rackPlace: '',
  ...values,
})
const pairAs = async (who: Who, id: string) => (await shop.as(who).get<Pair>(`/api/ski-pairs/${id}`)).body
/** A body for a change that keeps everything else as it is. */
const changeOf = ({
  id,
  version,
  lengthCm,
  season,
  homeSiteId,
  rackPlace,
  skiModel,
  bindingModelId,
}: Pair) => ({
  id,
  version,
  lengthCm,
  season,
  homeSiteId,
  rackPlace: rackPlace ?? '',
  skiModelId: skiModel.id,
  bindingModelId,
})

describe('who writes the fleet', () => {
  it.each(roles)('%s: only head technician and manager add pairs, boots and ski models', async (role) => {
    const allowed = role === 'manager' || role === 'head_technician' ? 201 : 403
    const number = 800 + roles.indexOf(role)
    const person = shop.as(role)
    expect((await person.send(createSkiPair, await pairBody({ code: `S${number}` }))).status).toBe(allowed)
    expect((await person.send(createBoots, bootsBody({ code: `B${number}` }))).status).toBe(allowed)
    const model = { id: null, name: `Merle ${number}`, waistMm: 70, offsetMm: 0, junior: false }
    expect((await person.send(saveSkiModel, model)).status).toBe(allowed)
    expect((await person.get('/api/ski-pairs')).status).toBe(200)
    expect((await person.get('/api/boots')).status).toBe(200)
  })

  it('a stranger reads nothing and writes nothing', async () => {
    const stranger = shop.stranger()
    expect((await stranger.get('/api/ski-pairs')).code).toBe('session.missing')
    expect((await stranger.send(createBoots, bootsBody())).code).toBe('session.missing')
  })

  it('another shop’s pair, boots, models and sites are answered like unknown ones', async () => {
    const other = await shop.another()
    const [pair, boots] = [await other.rackedPair(), await other.rackedBoots()]
    const me = shop.as('manager')
    expect((await me.get(`/api/ski-pairs/${pair.id}`)).code).toBe('items.unknown')
    expect((await me.get(`/api/boots/${boots.id}`)).code).toBe('items.unknown')
    const theirs = [
      [{ skiModelId: await other.skiModel() }, 'items.unknown'],
      [{ bindingModelId: await other.bindingModel('ladder-16') }, 'items.unknown'],
      [{ homeSiteId: other.sites.lower }, 'sites.unknown'],
    ] as const
    for (const [values, code] of theirs) {
      const made = await me.send(createSkiPair, await pairBody({ code: 'S777', ...values }))
      expect([made.status, made.code]).toEqual([404, code])
    }
    const changed = await me.send(changeBoots, { ...bootsWithoutCode(), id: boots.id, version: 1 })
    expect(changed.code).toBe('items.unknown')
    const skiId = pair.skis.left.id
    const read = await shop
      .as('technician')
      .send(readPreset, { skiId, version: 1, toe: 4, heel: 4, turns: null })
    expect(read.code).toBe('items.unknown')
    const list = await me.get<{ rows: SkiPairRow[] }>('/api/ski-pairs', { size: 100 })
    expect(list.body.rows.map(({ id }) => id)).not.toContain(pair.id)
  })
})

function bootsWithoutCode() {
  const { code: _code, ...values } = bootsBody()
  return values
}

describe('a new ski pair', () => {
  it('stands in commissioning at its home site with a label on each ski and nothing read yet', async () => {
    const made = await shop.as('head_technician').send(createSkiPair, await pairBody({ code: 'S417' }))
    expect(made.status).toBe(201)
    const pair = await pairAs('counter', made.ids.skiPairId)
    expect(pair).toMatchObject({ code: 'S417', state: 'commissioning', site: 'Lower Lift', rackPlace: null })
    expect(pair.labels.map(({ text, side, until }) => [text.slice(0, -1), side, until])).toEqual([
      ['S417L', 'left', null],
      ['S417R', 'right', null],
    ])
    expect(pair.presets.map(({ side, toe, readAt }) => [side, toe, readAt])).toEqual([
      ['left', null, null],
      ['right', null, null],
    ])
    expect(pair.fitsSoles).toBeNull()
    expect(pair.history).toEqual([])
    const again = await shop.as('manager').send(createSkiPair, await pairBody({ code: 'S417' }))
    expect([again.status, again.code, again.params]).toEqual([409, 'items.code_taken', { code: 'S417' }])
  })

  it('has a code of S and a number', async () => {
    for (const code of ['417', 'B417', 'S0417', 'S', 'S1234567', 's417']) {
      expect((await shop.as('manager').send(createSkiPair, await pairBody({ code }))).status).toBe(400)
    }
  })
})

describe('the list of ski pairs', () => {
  let other: TestShop
  const list = async (query: Record<string, string | number>) =>
    (await other.as('counter').get<{ rows: SkiPairRow[]; total: number }>('/api/ski-pairs', query)).body

  beforeAll(async () => {
    other = await shop.another()
    await other.rackedPair('ladder-16', { lengthCm: 149, rackPlace: 'B 2', preset: { toe: 5, heel: 5 } })
    await other.rackedPair('ladder-16', { lengthCm: 170, rackPlace: 'B 1', preset: { toe: 8, heel: 0 } })
    await other.rackedPair('ladder-12-s', {
      lengthCm: 163,
      rackPlace: 'C 1',
      preset: { toe: 5, heel: 5, turns: 0 },
    })
    const fourth = await other.rackedPair('pebble-20', { lengthCm: 100, rackPlace: 'D 10' })
    await other.change({ kind: 'ski_pair', id: fourth.id }, 'racked', 'service')
  })

  it('finds by code, rack place and length, and by nothing that only looks like a pattern', async () => {
    expect((await list({ search: 's104' })).rows.map(({ code }) => code)).toEqual(['S104'])
    expect((await list({ search: 'b ' })).total).toBe(2)
    expect((await list({ search: '163' })).rows.map(({ lengthCm }) => lengthCm)).toEqual([163])
    expect((await list({ search: '%' })).total).toBe(0)
    expect((await list({ search: '_' })).total).toBe(0)
  })

  it('is narrowed by state, site and track', async () => {
    expect((await list({ state: 'service' })).rows.map(({ code }) => code)).toEqual(['S104'])
    expect((await list({ site: other.sites.square })).total).toBe(0)
    expect((await list({ bindingModel: await other.bindingModel('ladder-16') })).total).toBe(2)
    expect((await list({ state: 'racked', search: 'c 1' })).total).toBe(1)
  })

  it('is sorted and paged', async () => {
    const lengths = async (query: Record<string, string | number>) =>
      (await list({ sort: 'lengthCm', ...query })).rows.map(({ lengthCm }) => lengthCm)
    expect(await lengths({})).toEqual([100, 149, 163, 170])
    expect(await lengths({ descending: 'true' })).toEqual([170, 163, 149, 100])
    expect(await lengths({ size: 3, page: 2 })).toEqual([170])
    expect((await list({ size: 3, page: 2 })).total).toBe(4)
  })

  it('says per pair where both skis stand and which soles they fit as they are', async () => {
    const { rows } = await list({})
    const first = rows.find(({ code }) => code === 'S101')!
    expect(first.presets.map(({ toe, heel }) => [toe, heel])).toEqual([
      [5, 5],
      [5, 5],
    ])
    const pair = await other.rackedPair('ladder-16')
    expect(first.fitsSoles).toEqual(soleRangeAt(pair.track, 5, 5))
    // far from any centred boot: no sole leads there
    expect(rows.find(({ code }) => code === 'S102')!.fitsSoles).toBeNull()
  })
})

describe('changing a pair', () => {
  it('is refused to whoever looked at it before somebody else changed it', async () => {
    const { id } = await shop.rackedPair()
    const seen = await pairAs('manager', id)
    const first = await shop.as('manager').send(changeSkiPair, { ...changeOf(seen), lengthCm: 170 })
    expect(first.status).toBe(201)
    const second = await shop.as('head_technician').send(changeSkiPair, { ...changeOf(seen), lengthCm: 156 })
    expect([second.status, second.code]).toEqual([409, 'items.changed'])
    expect((await pairAs('counter', id)).lengthCm).toBe(170)
    const noted = await shop.db.select().from(officeChanges).where(eq(officeChanges.subjectId, id))
    expect(noted.map(({ kind, fields }) => [kind, fields])).toEqual([['skiPairs.change', ['lengthCm']]])
  })

  it('to another binding voids its fitting and forgets where the old units stood', async () => {
    const set = await preparedSet(shop)
    const bindingModelId = await shop.bindingModel('ladder-12-s')
    const before = await pairAs('manager', set.pair.id)
    const changed = await shop.as('manager').send(changeSkiPair, { ...changeOf(before), bindingModelId })
    expect(changed.status).toBe(201)
    const [fitting] = await shop.db.select().from(fittings).where(eq(fittings.id, set.fittingId))
    expect(fitting).toMatchObject({ state: 'void', endReason: 'binding_model_changed' })
    const after = await pairAs('manager', set.pair.id)
    expect(after.state).toBe('racked')
    expect(after.presets.map(({ toe, heel }) => [toe, heel])).toEqual([
      [null, null],
      [null, null],
    ])
    expect(after.presetHistory[0]).toMatchObject({ toe: null, reason: 'binding_changed' })
  })

  it('to another ski model voids its fitting: waist and mounting mark are others', async () => {
    const set = await preparedSet(shop)
    const skiModelId = await addSkiModel(shop.db, shop.id, 'Fellwind 88', 88)
    const before = await pairAs('manager', set.pair.id)
    const changed = await shop.as('manager').send(changeSkiPair, { ...changeOf(before), skiModelId })
    expect(changed.status).toBe(201)
    const [fitting] = await shop.db.select().from(fittings).where(eq(fittings.id, set.fittingId))
    expect(fitting).toMatchObject({ state: 'void', endReason: 'ski_pair_changed' })
  })

  it('that is out to another binding opens a call-back', async () => {
    const set = await setOut(shop)
    const bindingModelId = await shop.bindingModel('ladder-12-s')
    const before = await pairAs('manager', set.pair.id)
    expect(
      (await shop.as('manager').send(changeSkiPair, { ...changeOf(before), bindingModelId })).status,
    ).toBe(201)
    const open = await shop.db.select().from(callBacks).where(eq(callBacks.fittingId, set.fittingId))
    expect(open.map(({ cause }) => cause)).toEqual(['binding_model_changed'])
  })

  it('that is held is refused', async () => {
    const { id } = await shop.rackedPair()
    await shop.hold({ kind: 'ski_pair', id }, 'racked')
    const answer = await shop.as('manager').send(changeSkiPair, changeOf(await pairAs('manager', id)))
    expect([answer.status, answer.code]).toEqual([409, 'items.held'])
  })

  it('to skis of another mounting mark offset voids the fittings of the whole ski model', async () => {
    const other = await shop.another()
    const set = await preparedSet(other)
    const [model] = (
      await other.as('manager').get<{ rows: { id: string; name: string }[] }>('/api/ski-models')
    ).body.rows
    const body = { id: model!.id, name: model!.name, waistMm: 74, offsetMm: 0, junior: false }
    await other.as('manager').send(saveSkiModel, body)
    const stateNow = async () =>
      (await other.db.select().from(fittings).where(eq(fittings.id, set.fittingId)))[0]
    expect(await stateNow()).toMatchObject({ state: 'prepared' })
    await other.as('manager').send(saveSkiModel, { ...body, offsetMm: 5 })
    expect(await stateNow()).toMatchObject({ state: 'void', endReason: 'ski_pair_changed' })
  })
})

describe('boots', () => {
  it('of another sole length or type void the fitting that has them; of another rack place do not', async () => {
    const set = await preparedSet(shop)
    const boots = async () =>
      (await shop.as('manager').get<BootsRow & { version: number }>(`/api/boots/${set.boots!.id}`)).body
    const change = async (values: object) => {
      const { id, version } = await boots()
      return shop.as('manager').send(changeBoots, { ...bootsWithoutCode(), id, version, ...values })
    }
    const stateNow = async () =>
      (await shop.db.select().from(fittings).where(eq(fittings.id, set.fittingId)))[0]
    expect((await change({ rackPlace: 'K 9' })).status).toBe(201)
    expect(await stateNow()).toMatchObject({ state: 'prepared' })
    expect((await change({ rackPlace: 'K 9', soleType: 'ISO 23223' })).status).toBe(201)
    expect(await stateNow()).toMatchObject({ state: 'void', endReason: 'sole_changed' })
    expect(await boots()).toMatchObject({ state: 'racked', rackPlace: 'K 9', soleType: 'ISO 23223' })
  })

  it('are found by sole length and mondopoint', async () => {
    const other = await shop.another()
    await other.rackedBoots({ soleLengthMm: 295, mondo: 255 })
    await other.rackedBoots({ soleLengthMm: 315, mondo: 275 })
    const list = async (query: Record<string, string | number>) =>
      (await other.as('counter').get<{ rows: BootsRow[] }>('/api/boots', query)).body.rows
    expect((await list({ search: '315' })).map(({ soleLengthMm }) => soleLengthMm)).toEqual([315])
    expect((await list({ mondo: 255 })).map(({ mondo }) => mondo)).toEqual([255])
    expect(
      (await list({ sort: 'soleLengthMm', descending: 'true' })).map(({ soleLengthMm }) => soleLengthMm),
    ).toEqual([315, 295])
  })
})

describe('reading where units stand', () => {
  it('is for technicians, by notches that the rails have', async () => {
    const pair = await shop.newPair('pebble-20')
    const read = (who: Who, heel: number, version = 0) =>
      shop.as(who).send(readPreset, { skiId: pair.skis.left.id, version, toe: 3, heel, turns: null })
    expect((await read('counter', 5)).code).toBe('session.role')
    expect((await read('manager', 5)).code).toBe('session.role')
    expect((await read('technician', 0)).params).toEqual({ part: 'heel' })
    expect((await read('technician', 5)).status).toBe(201)
    expect((await read('head_technician', 6)).code).toBe('items.changed')
    const [left] = (await pairAs('counter', pair.id)).presets
    expect(left).toMatchObject({ toe: 3, heel: 5, version: 1 })
    const [change] = await shop.db
      .select()
      .from(presetChanges)
      .where(eq(presetChanges.skiId, pair.skis.left.id))
    expect(change).toMatchObject({ reason: 'read', personId: shop.people.technician.id })
  })

  it('by two people at the same moment keeps one reading', async () => {
    const pair = await shop.rackedPair()
    const read = (who: Who, toe: number) =>
      shop.as(who).send(readPreset, { skiId: pair.skis.left.id, version: 1, toe, heel: 5, turns: null })
    const answers = await Promise.all([read('technician', 6), read('second_technician', 7)])
    expect(answers.map(({ status }) => status).sort()).toEqual([201, 409])
  })
})
