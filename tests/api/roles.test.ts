import { randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import { beforeAll, describe, expect, test } from 'vitest'
import { beginFormBody, openDoor } from '#shared/api/forms'
import { roles, type Role } from '#shared/permissions'
import { linkHeader, pinHeader } from '../../server/auth/actors'
import { passportFor } from '../../server/auth/passport'
import { callBacks, ownBoots, stateChanges } from '../../server/db/schema/schema'
import type { Route } from '../../server/routes/route'
import { routes } from '../../server/routes/routes'
import { newToken } from '../support/forms'
import { setOut } from '../support/handOvers'
import { staff } from '../support/people'
import { bodySamples, roleRows } from '../support/roleRows'
import { idPathsOf, sampleOf } from '../support/samples'
import { testShop, type TestShop } from '../support/shop'

/** Every route of the program, asked of the program itself. */
const all = routes(passportFor({ db: {} as never }))
const keyOf = ({ method, path }: Route) => `${method} ${path}`
const routesOf = (wanted: (row: (typeof roleRows)[string]) => boolean) =>
  all
    .filter((route) => wanted(roleRows[keyOf(route)] ?? 'open'))
    .map((route) => [keyOf(route), route] as const)

let shop: TestShop
let other: TestShop
let ours: Ids
let theirs: Ids
let devices: { ours: { id: string; token: string } }
let link: string

/** One real id of each kind of thing that a shop has, by the name of the field that takes it. */
type Ids = Record<string, string>

async function idsOf(of: TestShop): Promise<Ids> {
  const set = await setOut(of)
  const own = await setOut(of, { ownSoleLengthMm: 305 })
  const free = await of.rackedPair()
  const quarantineId = await of.hold({ kind: 'ski_pair', id: (await of.rackedPair()).id }, 'racked')
  const [change] = await of.db.select().from(stateChanges).where(eq(stateChanges.itemId, free.id))
  const [callBack] = await of.db
    .insert(callBacks)
    .values({
      shopId: of.id,
      fittingId: set.fittingId,
      rentalId: set.rental.id,
      recordId: set.recordId,
      cause: 'record_error',
      openedAt: new Date(),
    })
    .returning({ id: callBacks.id })
  const waiting = await of.rental()
  const boots = await of.rackedBoots()
  const device = await of.enrol('desk')
  const [ownBoot] = await of.db.select().from(ownBoots).where(eq(ownBoots.id, own.ownBootsId!))
  return {
    personId: of.people.second_counter.id,
    ownerId: of.people.head_technician.id,
    secondPersonId: of.people.second_technician.id,
    siteId: of.sites.lower,
    homeSiteId: of.sites.lower,
    site: of.sites.lower,
    deviceId: device.id,
    rentalId: waiting.id,
    seenInputsId: waiting.inputsId,
    ownBootsId: ownBoot!.id,
    skiModelId: await of.skiModel(),
    bindingModelId: free.bindingModelId,
    bindingModel: free.bindingModelId,
    skiPairId: free.id,
    skiId: free.skis.left.id,
    itemId: free.id,
    bootsId: boots.id,
    changeId: change!.id,
    quarantineId,
    fittingId: set.fittingId,
    replacesFittingId: set.fittingId,
    recordId: set.recordId,
    callBackId: callBack!.id,
    textId: randomUUID(),
  }
}

/** Fields that are called just `id`: what they name is in the route's address. */
const namedByPath: [RegExp, string][] = [
  [/ski-models/, 'skiModelId'],
  [/binding-models/, 'bindingModelId'],
  [/ski-pairs/, 'skiPairId'],
  [/boots/, 'bootsId'],
  [/rentals/, 'rentalId'],
  [/records/, 'recordId'],
  [/fittings|tickets|hand-overs/, 'fittingId'],
]

function nounOf(route: Route, path: string): string {
  const field = path.split('.').at(-1)!
  return field === 'id' ? namedByPath.find(([pattern]) => pattern.test(route.path))![1] : field
}

beforeAll(async () => {
  shop = await testShop()
  other = await shop.another()
  ours = await idsOf(shop)
  theirs = await idsOf(other)
  devices = { ours: await shop.enrol('bench') }
  const door = newToken()
  await shop.as('counter').send(openDoor, { siteId: shop.sites.lower, token: door })
  link = newToken()
  const begun = await shop.app
    .stranger()
    .post('/api/forms/begin')
    .send(beginFormBody.parse({ door, token: link }))
  expect(begun.status).toBeLessThan(300)
})

/** Asks as this browser; `{}` where a body is wanted and none is given. */
function ask(
  agent: ReturnType<TestShop['app']['stranger']>,
  route: Route,
  { params = {}, query = {}, body = {} }: { params?: object; query?: object; body?: unknown } = {},
) {
  const path = Object.entries(params).reduce<string>(
    (made, [name, value]) => made.replace(`:${name}`, String(value)),
    route.path,
  )
  const request = agent[route.method](path).query(query)
  return route.method === 'get' || route.method === 'delete' ? request : request.send(body as object)
}

/** Params and query of a read with our own shop's ids. */
function ownParts(route: Route) {
  const idAt = (path: string) => ours[nounOf(route, path)] ?? missing(route, path)
  const { params, query } = route.schemas
  return {
    params: params ? (sampleOf(params, idAt) as object) : {},
    query: query ? (sampleOf(query, idAt) as object) : {},
  }
}

function missing(route: Route, path: string): never {
  throw new Error(`no id of our shop for ${path} of ${keyOf(route)}`)
}

const isRoles = (row: (typeof roleRows)[string]): row is readonly Role[] => Array.isArray(row)

describe('who may call a route', () => {
  test('every route has its row, and every row its route', () => {
    expect(all.map(keyOf).sort()).toEqual(Object.keys(roleRows).sort())
  })

  test.each(routesOf(isRoles))('%s: nobody without signing in', async (_key, route) => {
    const answer = await ask(shop.app.stranger(), route, ownParts(route))
    expect([answer.status, answer.body.code]).toEqual([401, 'session.missing'])
  })

  test.each(routesOf(isRoles))('%s: no renter with a link', async (_key, route) => {
    const renter = shop.app.stranger().set(linkHeader, link)
    const answer = await ask(renter, route, ownParts(route))
    expect([answer.status, answer.body.code]).toEqual([401, 'session.missing'])
  })

  test.each(routesOf(isRoles))('%s: its roles and no other', async (key, route) => {
    const allowed = roleRows[key] as readonly Role[]
    for (const role of roles) {
      const answer = await ask(await shop.agent(role), route, ownParts(route))
      const refused = answer.status === 401 || answer.body.code === 'session.role'
      expect([role, refused ? 'refused' : 'let in']).toEqual([
        role,
        allowed.includes(role) ? 'let in' : 'refused',
      ])
      if (refused) expect(answer.status).toBe(403)
    }
  })

  test.each(routesOf((row) => row === 'link'))(
    '%s: with a link that stands, and nobody else',
    async (_k, route) => {
      const withLink = await ask(shop.app.stranger().set(linkHeader, link), route)
      expect(['links.unknown', 'session.missing']).not.toContain(withLink.body.code)
      for (const agent of [
        shop.app.stranger(),
        shop.app.stranger().set(linkHeader, newToken()),
        await shop.agent('manager'),
      ]) {
        const answer = await ask(agent, route)
        expect([answer.status, answer.body.code]).toEqual([404, 'links.unknown'])
      }
    },
  )

  test('what anybody may read names nobody', async () => {
    const stranger = shop.app.stranger()
    const read = async (path: string) => (await stranger.get(path)).body
    expect(await read('/api/session')).toBeNull()
    expect(await read('/api/station')).toBeNull()
    expect(await read('/api/session/demo')).toBeNull()
    expect(await read('/api/setup')).toEqual({ open: false })
    const description = JSON.stringify(await read('/api/openapi.json'))
    for (const { name } of Object.values(staff)) expect(description).not.toContain(name)
  })
})

/** Everything that the other shop has, as one number; no request of ours may change it. */
async function digestOf(of: TestShop): Promise<string> {
  const tables = await of.db.execute<{ table_name: string }>(
    sql`select table_name from information_schema.columns where table_schema = 'public' and column_name = 'shop_id' order by 1`,
  )
  const parts: string[] = []
  for (const { table_name: name } of tables.rows) {
    const { rows } = await of.db.execute<{ digest: string | null }>(
      sql`select md5(string_agg(t::text, ',' order by t::text)) as digest from ${sql.identifier(name)} t where shop_id = ${of.id}`,
    )
    parts.push(`${name} ${rows[0]?.digest ?? ''}`)
  }
  const people = await of.db.execute<{ digest: string }>(
    sql`select md5(string_agg(p::text, ',' order by p.id)) as digest from people p join memberships m on m.person_id = p.id where m.shop_id = ${of.id}`,
  )
  return [...parts, people.rows[0]?.digest].join('\n')
}

const withIds = all.flatMap((route) =>
  (['body', 'params', 'query'] as const).flatMap((part) => {
    const schema = route.schemas[part]
    if (!schema || !isRoles(roleRows[keyOf(route)] ?? 'open')) return []
    return idPathsOf(schema)
      .filter((path) => !(part === 'body' && path === 'id'))
      .map((path) => [`${keyOf(route)}, ${path}`, route, part, path] as const)
  }),
)

describe("another shop's ids", () => {
  test('there are ids to try', () => {
    expect(withIds.length).toBeGreaterThan(60)
  })

  test.each(withIds)('%s: answered like an id that nobody ever made', async (_name, route, part, path) => {
    const allowed = roleRows[keyOf(route)] as readonly Role[]
    const who = (['head_technician', 'manager'] as const).find((role) => allowed.includes(role))!
    const agent = await shop.agent(who, devices.ours)
    const before = await digestOf(other)

    const foreign = await send(theirs[nounOf(route, path)] ?? missing(route, path))
    const unknown = await send(randomUUID())
    expect(foreign.status).toBe(unknown.status)
    expect(foreign.body).toEqual(unknown.body)
    if (route.method !== 'get') expect(foreign.status).toBeGreaterThanOrEqual(400)
    expect(await digestOf(other)).toBe(before)

    async function send(id: string) {
      const idAt = (at: string) => {
        if (part === 'body' && at === 'id') return randomUUID()
        return at === path ? id : (ours[nounOf(route, at)] ?? missing(route, at))
      }
      const parts = ownParts(route)
      const { schemas } = route
      if (part !== 'body') parts[part] = sampleOf(schemas[part]!, idAt) as object
      let body = schemas.body ? sampleOf(schemas.body, idAt) : undefined
      if (body) {
        body = bodySamples[keyOf(route)]?.(body as never) ?? body
        // The sample is one that the route's own schema takes, or this test would prove nothing.
        expect(schemas.body!.safeParse(body).error?.issues ?? []).toEqual([])
      }
      const signer = JSON.stringify(body ?? '').includes('secondPersonId') ? 'second_technician' : who
      return ask(agent.set(pinHeader, staff[signer].pin), route, { ...parts, body })
    }
  })

  test.each(routesOf(isRoles).filter(([, route]) => route.method === 'get'))(
    '%s: nothing of theirs is in what we read',
    async (_key, route) => {
      const answer = await ask(await shop.agent('manager'), route, ownParts(route))
      const text = JSON.stringify(answer.body)
      for (const [name, id] of Object.entries(theirs))
        expect([name, text.includes(id)]).toEqual([name, false])
      for (const { email } of Object.values(other.people)) expect(text).not.toContain(email)
    },
  )
})
