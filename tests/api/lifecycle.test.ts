import pg from 'pg'
import { sql } from 'drizzle-orm'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { canMove, itemStates, lifecycleEdges, type ItemState } from '#shared/lifecycle/itemStates'
import { inspections } from '../../server/db/schema/schema'
import { databaseError } from '../../server/errors'
import { preparedSet, setOut } from '../support/handOvers'
import { testShop, type TestShop } from '../support/shop'

/** What an edge needs beside itself, and how the database refuses it without that. */
const withoutItsFact: Partial<Record<string, string>> = {
  'racked claimed': 'NW008',
  'claimed prepared': 'NW008',
  'prepared out': 'NW008',
  'unchecked racked': 'NW001',
  'quarantine unchecked': 'NW002',
  'quarantine service': 'NW002',
  'quarantine retired': 'NW002',
  ...Object.fromEntries(itemStates.map((state) => [`${state} quarantine`, 'NW002'])),
}

let shop: TestShop
/** One ski pair in every state, brought there the way a shop brings it there. */
let pairIn: Record<ItemState, string>
let app: pg.Client

const isPair = (id: string) => ({ kind: 'ski_pair', id }) as const

async function walk(...states: ItemState[]): Promise<string> {
  const { id } = await shop.rackedPair()
  for (const [index, to] of states.entries()) await shop.change(isPair(id), states[index - 1] ?? 'racked', to)
  return id
}

async function pairsInEveryState(): Promise<Record<ItemState, string>> {
  const claimed = await shop.rackedPair()
  await shop.fitting({ rental: await shop.rental(), pair: claimed, boots: await shop.rackedBoots() })
  const lost = (await setOut(shop)).pair.id
  await shop.change(isPair(lost), 'out', 'lost')
  const held = await walk()
  await shop.hold(isPair(held), 'racked')
  return {
    commissioning: (await shop.newPair()).id,
    racked: await walk(),
    claimed: claimed.id,
    prepared: (await preparedSet(shop)).pair.id,
    out: (await setOut(shop)).pair.id,
    unchecked: await walk('unchecked'),
    service: await walk('service'),
    withdrawn: await walk('unchecked', 'withdrawn'),
    under_test: await walk('under_test'),
    lost,
    quarantine: held,
    retired: await walk('retired'),
    sold: await walk('sold'),
  }
}

/** Tries a state change as the server's role and takes it back: the SQLSTATE of the refusal, or 'done'. */
async function attempt(itemId: string, from: string, to: string): Promise<{ code: string; message: string }> {
  await app.query('begin')
  try {
    await app.query(
      `insert into state_changes (shop_id, item_kind, item_id, from_state, to_state, site_id, occurred_at)
       values ($1, 'ski_pair', $2, $3, $4, $5, now())`,
      [shop.id, itemId, from, to, shop.sites.lower],
    )
    return { code: 'done', message: '' }
  } catch (error) {
    const { code, message } = databaseError(error)!
    return { code, message }
  } finally {
    await app.query('rollback')
  }
}

beforeAll(async () => {
  shop = await testShop()
  app = new pg.Client({ connectionString: shop.app.database.appUrl })
  await app.connect()
  pairIn = await pairsInEveryState()
})
afterAll(() => app.end())

describe('the life cycle in the database', () => {
  it('has the edges that the program has, and no other', async () => {
    const { rows } = await shop.db.execute<{ from_state: ItemState; to_state: ItemState }>(
      sql`select from_state, to_state from lifecycle_edges`,
    )
    const names = (edges: readonly { from: string; to: string }[]) =>
      edges.map(({ from, to }) => `${from} ${to}`).sort()
    expect(names(rows.map(({ from_state, to_state }) => ({ from: from_state, to: to_state })))).toEqual(
      names(lifecycleEdges),
    )
  })

  for (const from of itemStates) {
    it(`leads from ${from} along its edges and nowhere else`, async () => {
      for (const to of itemStates) {
        const { code, message } = await attempt(pairIn[from], from, to)
        const expected = canMove(from, to) ? (withoutItsFact[`${from} ${to}`] ?? 'done') : 'NW001'
        expect(`${from} ${to}: ${code}`).toBe(`${from} ${to}: ${expected}`)
        expect(message.startsWith('no way')).toBe(!canMove(from, to))
      }
    })
  }

  it('moves an item from the state that it is in, not from one that somebody believes', async () => {
    expect((await attempt(pairIn.out, 'racked', 'service')).code).toBe('NW001')
    expect((await attempt(pairIn.unchecked, 'service', 'unchecked')).code).toBe('NW001')
  })

  it('lets one of two changes at the same moment through', async () => {
    const { id } = await shop.rackedPair()
    const results = await Promise.allSettled([
      shop.change(isPair(id), 'racked', 'service'),
      shop.change(isPair(id), 'racked', 'retired'),
      shop.change(isPair(id), 'racked', 'unchecked'),
    ])
    expect(results.filter(({ status }) => status === 'fulfilled')).toHaveLength(1)
    const { rows } = await shop.db.execute(
      sql`select count(*)::int n from state_changes where item_id = ${id}`,
    )
    expect(rows).toEqual([{ n: 2 }])
  })
})

describe('unchecked', () => {
  const inspected = async (itemId: string, verdict: 'rack' | 'service') => {
    const [row] = await shop.db
      .insert(inspections)
      .values({
        shopId: shop.id,
        itemKind: 'ski_pair',
        itemId,
        checks: {
          edge: 'sound',
          base: 'sound',
          brake: 'sound',
          heel: 'sound',
          toe: 'sound',
          slide_plate: 'sound',
          screws: 'sound',
        },
        verdict,
        personId: shop.people.technician.id,
        occurredAt: new Date(),
      })
      .returning({ id: inspections.id })
    return row!.id
  }
  const codeOf = async (change: Promise<unknown>) =>
    change.then(
      () => 'done',
      (error: unknown) => databaseError(error)?.code,
    )

  it('ends at the rack only with an inspection of this very item that says so, and each opens the rack once', async () => {
    const id = await walk('unchecked')
    const other = await inspected(pairIn.unchecked, 'rack')
    const rack = (subjectId?: string) => codeOf(shop.change(isPair(id), 'unchecked', 'racked', { subjectId }))
    expect(await rack()).toBe('NW001')
    expect(await rack(other)).toBe('NW001')
    expect(await rack(await inspected(id, 'service'))).toBe('NW001')
    const sound = await inspected(id, 'rack')
    expect(await rack(sound)).toBe('done')
    await shop.change(isPair(id), 'racked', 'unchecked')
    expect(await rack(sound)).toBe('NW001')
  })

  it('does not end at the rack while one ski is still with a renter', async () => {
    const { pair } = await setOut(shop)
    await shop.change(isPair(pair.id), 'out', 'unchecked')
    const subjectId = await inspected(pair.id, 'rack')
    expect(await codeOf(shop.change(isPair(pair.id), 'unchecked', 'racked', { subjectId }))).toBe('NW001')
  })
})

describe('taking a step back', () => {
  it('goes along the latest change only, and only once', async () => {
    const { id } = await shop.rackedPair()
    const first = await shop.change(isPair(id), 'racked', 'service')
    const second = await shop.change(isPair(id), 'service', 'unchecked')
    const undo = (from: ItemState, to: ItemState, undoesId: string) =>
      shop.change(isPair(id), from, to, { undoesId })
    await expect(undo('unchecked', 'racked', first)).rejects.toThrow()
    const back = await undo('unchecked', 'service', second)
    await expect(undo('service', 'unchecked', back)).rejects.toThrow()
    await expect(undo('service', 'racked', first)).rejects.toThrow()
  })

  it('is over after a minute, and after a day for what was retired', async () => {
    const age = async (id: string, seconds: number) => {
      const owner = new pg.Client({ connectionString: shop.app.database.ownerUrl })
      await owner.connect()
      await owner.query('alter table state_changes disable trigger user')
      await owner.query(
        `update state_changes set recorded_at = recorded_at - make_interval(secs => $2) where id = $1`,
        [id, seconds],
      )
      await owner.query('alter table state_changes enable trigger user')
      await owner.end()
    }
    const { id } = await shop.rackedPair()
    const toService = await shop.change(isPair(id), 'racked', 'service')
    await age(toService, 61)
    await expect(shop.change(isPair(id), 'service', 'racked', { undoesId: toService })).rejects.toThrow()
    const gone = await shop.rackedPair()
    const retired = await shop.change(isPair(gone.id), 'racked', 'retired')
    await age(retired, 23 * 3600)
    await shop.change(isPair(gone.id), 'retired', 'racked', { undoesId: retired })
    const again = await shop.change(isPair(gone.id), 'racked', 'retired')
    await age(again, 25 * 3600)
    await expect(shop.change(isPair(gone.id), 'retired', 'racked', { undoesId: again })).rejects.toThrow()
  })
})
