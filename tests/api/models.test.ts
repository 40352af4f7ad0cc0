import { eq } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import {
  approveBindingModel,
  saveBindingModel,
  saveSkiModel,
  setWindowPicture,
  type BindingModel,
} from '#shared/api/models'
import { roles } from '#shared/permissions'
import type { TrackModel } from '#shared/track/trackModel'
import { windowPicture } from '../../server/db/seed/pictures'
import { demoTrackModels } from '../../server/db/seed/trackModels'
import { fittings, skis } from '../../server/db/schema/schema'
import { preparedSet } from '../support/handOvers'
import type { Who } from '../support/people'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop
beforeAll(async () => void (shop = await testShop()))

const png = `data:image/png;base64,${windowPicture(0.5).toString('base64')}`
const otherPng = `data:image/png;base64,${windowPicture(0.3).toString('base64')}`
let number = 0
const sheet = (values: object = {}) => ({
  id: null as string | null,
  version: null as number | null,
  name: `ladder ${(number += 1)}`,
  track: demoTrackModels['ladder-16'] as TrackModel,
  accepts: ['ISO 5355 A' as const],
  refuses: ['ISO 9523' as const],
  brakeMm: 85,
  manualDocument: 'Workshop manual (invented)',
  manualEdition: '4',
  manualPage: '12',
  windowNote: 'The pointer stands between the two edges.',
  ...values,
})
const modelAs = async (who: Who, id: string, at = shop) =>
  (await at.as(who).get<BindingModel>(`/api/binding-models/${id}`)).body
async function newModel(values: object = {}) {
  const made = await shop.as('manager').send(saveBindingModel, sheet(values))
  expect(made.status).toBe(201)
  return made.ids.bindingModelId
}
const bodyOf = (model: BindingModel) => {
  const { id, version, name, track, brakeMm, manualDocument, manualEdition, manualPage, windowNote } = model
  return {
    ...{ id, version, name, track, brakeMm, manualDocument, manualEdition, manualPage, windowNote },
    ...{ accepts: ['ISO 5355 A' as const], refuses: ['ISO 9523' as const] },
  }
}
const setPicture = async (id: string, picture = png, at = shop) =>
  at
    .as('manager')
    .send(setWindowPicture, { id, version: (await modelAs('manager', id, at)).version, picture })
const approve = async (who: Who, id: string, version?: number) =>
  shop.as(who).send(approveBindingModel, { id, version: version ?? (await modelAs('manager', id)).version })

describe('a binding model', () => {
  it.each(roles)(
    '%s: the sheet is written by head technician and manager, signed by a head technician',
    async (role) => {
      const writes = role === 'manager' || role === 'head_technician' ? 201 : 403
      expect((await shop.as(role).send(saveBindingModel, sheet())).status).toBe(writes)
      const id = await newModel()
      const { version } = await modelAs(role, id)
      expect((await shop.as(role).send(setWindowPicture, { id, version, picture: png })).status).toBe(writes)
      await setPicture(id)
      expect((await approve(role, id)).status).toBe(role === 'head_technician' ? 201 : 403)
    },
  )

  it('is signed only when nothing of the sheet is missing, and what is missing is said', async () => {
    const id = await newModel({ manualPage: '', windowNote: '' })
    const refused = await approve('head_technician', id)
    expect([refused.status, refused.code]).toEqual([422, 'models.sheet_unfinished'])
    expect(refused.params).toEqual({ missing: ['manualPage', 'windowNote', 'windowPicture'] })
    const seen = await modelAs('head_technician', id)
    await shop
      .as('manager')
      .send(saveBindingModel, { ...bodyOf(seen), manualPage: '12', windowNote: 'Between.' })
    await setPicture(id)
    expect((await approve('head_technician', id)).status).toBe(201)
    expect(await modelAs('counter', id)).toMatchObject({
      approved: true,
      approvedBy: shop.people.head_technician.name,
      hasWindowPicture: true,
    })
  })

  it('is signed as the head technician saw it and not as somebody changed it meanwhile', async () => {
    const id = await newModel()
    await setPicture(id)
    const { version } = await modelAs('head_technician', id)
    await setPicture(id, otherPng)
    expect((await approve('head_technician', id, version)).code).toBe('items.changed')
  })

  it.each<[string, (seen: BindingModel, at: TestShop) => Promise<unknown>]>([
    [
      'the page',
      (seen, at) => at.as('manager').send(saveBindingModel, { ...bodyOf(seen), manualPage: '13' }),
    ],
    ['a sole type', (seen, at) => at.as('manager').send(saveBindingModel, { ...bodyOf(seen), refuses: [] })],
    [
      'the geometry',
      (seen, at) => {
        const track = { ...seen.track, centreWindowMm: 2.5 }
        return at.as('manager').send(saveBindingModel, { ...bodyOf(seen), track })
      },
    ],
    ['the picture', ({ id }, at) => setPicture(id, otherPng, at)],
  ])('is no longer approved, and its open fittings are void, once %s changed', async (_what, change) => {
    const other = await shop.another()
    const set = await preparedSet(other)
    const seen = await modelAs('manager', set.pair.bindingModelId, other)
    expect(seen.approved).toBe(true)
    await change(seen, other)
    expect(await modelAs('manager', seen.id, other)).toMatchObject({ approved: false, approvedBy: null })
    const [fitting] = await other.db.select().from(fittings).where(eq(fittings.id, set.fittingId))
    expect(fitting).toMatchObject({ state: 'void', endReason: 'binding_model_changed' })
  })

  it('keeps its approval and its fittings when only its name changed', async () => {
    const other = await shop.another()
    const set = await preparedSet(other)
    const seen = await modelAs('manager', set.pair.bindingModelId, other)
    const body = {
      ...bodyOf(seen),
      accepts: ['ISO 5355 A' as const, 'ISO 23223' as const],
      name: 'ladder sixteen',
    }
    expect((await other.as('manager').send(saveBindingModel, body)).status).toBe(201)
    expect(await modelAs('manager', seen.id, other)).toMatchObject({ name: 'ladder sixteen', approved: true })
    const [fitting] = await other.db.select().from(fittings).where(eq(fittings.id, set.fittingId))
    expect(fitting!.state).toBe('prepared')
  })

  it('takes no geometry that people could not read, no sole type twice and no name twice', async () => {
    const track = demoTrackModels['ladder-16']
    const short = { ...track, marks: { ...track.marks, toe: track.marks.toe.slice(1) } }
    const refused = await shop.as('manager').send(saveBindingModel, sheet({ track: short }))
    expect([refused.status, refused.params]).toEqual([422, { problems: ['mark_count'] }])
    const both = sheet({ accepts: ['ISO 9523'] })
    expect((await shop.as('manager').send(saveBindingModel, both)).status).toBe(400)
    await newModel({ name: 'twice' })
    const again = await shop.as('manager').send(saveBindingModel, sheet({ name: 'twice' }))
    expect([again.status, again.code]).toEqual([409, 'models.name_taken'])
    const ski = { id: null, name: 'twice', waistMm: 74, offsetMm: 0, junior: false }
    expect((await shop.as('manager').send(saveSkiModel, ski)).status).toBe(201)
    expect((await shop.as('manager').send(saveSkiModel, ski)).code).toBe('models.name_taken')
  })

  it('whose marks were moved takes the presets with their marks, and forgets those whose mark is gone', async () => {
    const other = await shop.another()
    const letters = await other.rackedPair('pebble-20', { preset: { toe: 2, heel: 5 } })
    const gone = await other.rackedPair('pebble-20', { preset: { toe: 9, heel: 5 } })
    const seen = await modelAs('manager', letters.bindingModelId, other)
    // the rail begins two notches earlier than it was described: C now stands at notch 0; J is not on it
    const track: TrackModel = {
      ...seen.track,
      toe: { ...seen.track.toe, first: -2, last: 6, zeroMm: seen.track.toe.zeroMm + 12 },
      marks: { ...seen.track.marks, toe: [...'ABCDEFGHI'] },
    }
    const body = { ...bodyOf(seen), accepts: ['ISO 5355 A' as const, 'ISO 5355 C' as const], track }
    expect((await other.as('manager').send(saveBindingModel, body)).status).toBe(201)
    const standing = async (skiId: string) => {
      const [ski] = await other.db.select().from(skis).where(eq(skis.id, skiId))
      return [ski!.presetToe, ski!.presetHeel]
    }
    expect(await standing(letters.skis.left.id)).toEqual([0, 5])
    expect(await standing(gone.skis.left.id)).toEqual([null, null])
  })

  it('of another shop is unknown, its picture too', async () => {
    const other = await shop.another()
    const id = await other.bindingModel('ladder-16')
    const me = shop.as('head_technician')
    expect((await me.get(`/api/binding-models/${id}`)).code).toBe('items.unknown')
    expect((await me.get(`/api/binding-models/${id}/window-picture`)).code).toBe('items.unknown')
    expect((await me.send(approveBindingModel, { id, version: 1 })).code).toBe('items.unknown')
    expect((await me.send(saveBindingModel, sheet({ id, version: 1 }))).code).toBe('items.unknown')
  })
})

describe('the picture of the forward-pressure window', () => {
  it('comes back as the image that it is, byte for byte', async () => {
    const id = await newModel()
    await setPicture(id)
    const answer = await (await shop.agent('technician')).get(`/api/binding-models/${id}/window-picture`)
    expect(answer.headers['content-type']).toBe('image/png')
    expect(Buffer.compare(answer.body as Buffer, windowPicture(0.5))).toBe(0)
    const none = await shop.as('technician').get(`/api/binding-models/${await newModel()}/window-picture`)
    expect(none.status).toBe(404)
  })

  it('is judged by its content, whatever it says it is, and is not larger than 200 kB', async () => {
    const id = await newModel()
    const jpeg = Buffer.concat([Buffer.from([0xff, 0xd8, 0xff, 0xe0]), Buffer.alloc(40)])
    const saidToBePng = `data:image/png;base64,${jpeg.toString('base64')}`
    expect((await setPicture(id, saidToBePng)).status).toBe(201)
    const answer = await (await shop.agent('technician')).get(`/api/binding-models/${id}/window-picture`)
    expect(answer.headers['content-type']).toBe('image/jpeg')
    const script = Buffer.from('<svg xmlns="http://www.w3.org/2000/svg" onload="alert(1)"/>').toString(
      'base64',
    )
    expect((await setPicture(id, `data:image/png;base64,${script}`)).status).toBe(400)
    expect((await setPicture(id, `data:image/svg+xml;base64,${script}`)).status).toBe(400)
    const large = Buffer.concat([windowPicture(0.5), Buffer.alloc(205_000)]).toString('base64')
    expect((await setPicture(id, `data:image/png;base64,${large}`)).status).toBe(400)
  })
})
