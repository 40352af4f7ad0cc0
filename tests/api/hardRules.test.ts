import { randomBytes, randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import pg from 'pg'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { changeBoots } from '#shared/api/boots'
import { openQuarantine } from '#shared/api/items'
import { saveSkiModel } from '#shared/api/models'
import { readPreset } from '#shared/api/skiPairs'
import {
  bindingModels,
  callBacks,
  boots as bootsTable,
  fittingInputs,
  fittings,
  renters,
  skiModels,
  skis,
} from '../../server/db/schema/schema'
import { databaseError } from '../../server/errors'
import { handOver as handOverSet, preparedSet, setOut, type TestSet } from '../support/handOvers'
import { testShop, type TestShop } from '../support/shop'
import { someoneWaits } from '../support/waits'

let shop: TestShop
let owner: pg.Client
beforeAll(async () => {
  shop = await testShop()
  owner = new pg.Client({ connectionString: shop.app.database.ownerUrl })
  await owner.connect()
})
afterAll(() => owner.end())

const codeOf = (attempt: Promise<unknown>) =>
  attempt.then(
    () => 'done',
    (error: unknown) => databaseError(error)?.code ?? String(error),
  )
const asApp = async (text: string, values: unknown[] = []) => {
  const client = await shop.app.database.pool.connect()
  try {
    return await client.query(text, values)
  } finally {
    client.release()
  }
}

describe('one open fitting per ski pair and per pair of boots', () => {
  it('stands when two transactions claim one pair at the same moment', async () => {
    const pair = await shop.rackedPair()
    const claims = await Promise.all(
      Array.from({ length: 6 }, async () => ({
        rental: await shop.rental(),
        pair,
        boots: await shop.rackedBoots(),
      })),
    )
    const results = await Promise.all(claims.map((claim) => codeOf(shop.fitting(claim))))
    expect(results.filter((result) => result === 'done')).toHaveLength(1)
    const open = await shop.db.$count(
      fittings,
      sql`${fittings.skiPairId} = ${pair.id} and ${fittings.state} in ('claimed', 'prepared')`,
    )
    expect(open).toBe(1)
  })

  it('stands when two transactions claim one pair of boots at the same moment', async () => {
    const boots = await shop.rackedBoots()
    const claims = await Promise.all(
      Array.from({ length: 6 }, async () => ({
        rental: await shop.rental(),
        pair: await shop.rackedPair(),
        boots,
      })),
    )
    const results = await Promise.all(claims.map((claim) => codeOf(shop.fitting(claim))))
    expect(results.filter((result) => result === 'done')).toHaveLength(1)
  })

  it('stands when a fitting is written without the state of its items, and when a state is written without a fitting', async () => {
    const { pair, fittingId } = await preparedSet(shop)
    await expect(
      shop.db.transaction(async (tx) => {
        await tx
          .update(fittings)
          .set({ state: 'void', endReason: 'boots_changed' })
          .where(eq(fittings.id, fittingId))
      }),
    ).rejects.toThrow()
    expect(await codeOf(shop.change({ kind: 'ski_pair', id: pair.id }, 'prepared', 'racked'))).toBe('NW008')
  })

  it('is not gone round by a fitting that is born further on', async () => {
    const { fittingId } = await preparedSet(shop)
    const columns = `shop_id, site_id, number, rental_id, renter_id, inputs_id, ski_pair_id, boots_id, sole_length_mm, release,
      value, track, targets, edition, rules_version, approved, promised_at, claimed_by, claimed_at`
    const born = (state: string) =>
      codeOf(
        asApp(
          `insert into fittings (${columns}, state, record_id)
           select ${columns.replace('number', 'number + 5000')}, $2, record_id from fittings where id = $1`,
          [fittingId, state],
        ),
      )
    for (const state of ['prepared', 'handed_over', 'void']) expect(await born(state)).toBe('NW010')
  })
})

describe('nothing that changed since it was signed is handed over', () => {
  const handOver = (set: TestSet) =>
    shop.db
      .execute(
        sql`insert into hand_overs (shop_id, site_id, fitting_id, record_id, rental_id, signature_sha256, signed_as, text_id,
          text_version, text_sha256, person_id, occurred_at)
        select ${shop.id}, ${shop.sites.lower}, ${set.fittingId}, ${set.recordId}, ${set.rental.id}, 'tests', 'renter',
          id, version, sha256, ${shop.people.counter.id}, now() from shop_texts where shop_id = ${shop.id} limit 1`,
      )
      .then(
        () => 'done',
        (error: unknown) => {
          const refusal = databaseError(error)!
          return `${refusal.code} ${refusal.detail}`
        },
      )

  it('and what did not change is', async () => {
    expect(await handOver(await preparedSet(shop))).toBe('done')
  })

  it('not for an e-mail address, which is not what anything was set by', async () => {
    const set = await preparedSet(shop)
    await shop.db
      .update(renters)
      .set({ email: 'other@renter.test' })
      .where(eq(renters.id, set.rental.renterId))
    expect(await handOver(set)).toBe('done')
  })

  it.each<[string, string, (set: TestSet) => Promise<unknown>]>([
    [
      'the renter’s data',
      'renter_data',
      async ({ rental }) => {
        const id = randomUUID()
        await shop.db.insert(fittingInputs).values({
          id,
          shopId: shop.id,
          renterId: rental.renterId,
          salt: randomBytes(16),
          mass: { unit: 'kg', value: 79 },
          massSource: 'declared',
          height: { unit: 'cm', value: 178 },
          heightSource: 'declared',
          age: 34,
          skierType: 'II',
        })
        await shop.db.update(renters).set({ currentInputsId: id }).where(eq(renters.id, rental.renterId))
      },
    ],
    [
      'the sole length of the boots',
      'sole',
      ({ boots }) =>
        shop.db.update(bootsTable).set({ soleLengthMm: 306 }).where(eq(bootsTable.id, boots!.id)),
    ],
    [
      'the sole type of the boots',
      'sole',
      ({ boots }) =>
        shop.db.update(bootsTable).set({ soleType: 'ISO 23223' }).where(eq(bootsTable.id, boots!.id)),
    ],
    [
      'a unit’s correction',
      'correction,preset',
      ({ pair }) =>
        asApp(
          `insert into preset_changes (shop_id, ski_id, preset_toe, preset_heel, preset_version, toe_correction, heel_correction, reason, occurred_at)
           select shop_id, id, preset_toe, preset_heel, preset_version + 1, 0.5, heel_correction, 'correction', now() from skis where id = $1`,
          [pair.skis.left.id],
        ),
    ],
    [
      'a preset, by somebody else',
      'preset',
      ({ pair }) =>
        asApp(
          `insert into preset_changes (shop_id, ski_id, preset_toe, preset_heel, preset_version, toe_correction, heel_correction, reason, occurred_at)
           select shop_id, id, preset_toe + 1, preset_heel, preset_version + 1, toe_correction, heel_correction, 'read', now() from skis where id = $1`,
          [pair.skis.right.id],
        ),
    ],
  ])('not after %s changed', async (_what, detail, change) => {
    const set = await preparedSet(shop)
    await change(set)
    expect(await handOver(set)).toBe(`NW003 ${detail}`)
  })

  it('not after the sheet of the binding model changed', async () => {
    const other = await shop.another()
    const set = await preparedSet(other)
    await other.db.update(bindingModels).set({ manualPage: '13' }).where(eq(bindingModels.shopId, other.id))
    const [row] = await other.db
      .select({ changed: sql<string[]>`changed_since(${fittings})` })
      .from(fittings)
      .where(eq(fittings.id, set.fittingId))
    expect(row!.changed).toEqual(['binding_model'])
  })

  it('not after the skis’ mounting mark moved', async () => {
    const other = await shop.another()
    const set = await preparedSet(other)
    await other.db.update(skiModels).set({ offsetMm: 8 }).where(eq(skiModels.shopId, other.id))
    const [row] = await other.db
      .select({ changed: sql<string[]>`changed_since(${fittings})` })
      .from(fittings)
      .where(eq(fittings.id, set.fittingId))
    expect(row!.changed).toEqual(['ski_pair'])
  })

  it('what is handed over while the model of its skis is edited is called back', async () => {
    const other = await shop.another()
    const set = await preparedSet(other)
    const [model] = await other.db.select().from(skiModels).where(eq(skiModels.shopId, other.id))
    const { id, name, waistMm, junior } = model!
    const edit = async () =>
      other.as('manager').send(saveSkiModel, { id, name, waistMm, offsetMm: 8, junior })
    let editing: ReturnType<typeof edit> | undefined
    await other.agent('manager')
    await other.db.transaction(async (tx) => {
      await handOverSet(tx as unknown as TestShop['db'], other, set)
      editing = edit()
      await someoneWaits(other.db)
    })
    const edited = await editing!
    expect(edited.status).toBe(201)
    const open = await other.db.select().from(callBacks).where(eq(callBacks.fittingId, set.fittingId))
    expect(open.map(({ cause }) => cause)).toEqual(['ski_pair_changed'])
  })

  it('a void fitting is not signed, prepared or handed over any more', async () => {
    const set = await preparedSet(shop)
    const boots = await shop.as('head_technician').get<{ version: number }>(`/api/boots/${set.boots!.id}`)
    const changed = await shop.as('head_technician').send(changeBoots, {
      id: set.boots!.id,
      version: boots.body.version,
      model: 'Tarn 90',
      mondo: 265,
      soleLengthMm: 301,
      soleType: 'ISO 5355 A',
      season: 2025,
      homeSiteId: shop.sites.lower,
      rackPlace: 'K 1',
    })
    expect(changed.status).toBe(201)
    const [fitting] = await shop.db.select().from(fittings).where(eq(fittings.id, set.fittingId))
    expect(fitting).toMatchObject({ state: 'void', endReason: 'sole_changed' })
    expect(await handOver(set)).toBe('NW005 void')
    for (const state of ['claimed', 'prepared', 'handed_over']) {
      const back = shop.db.update(fittings).set({ state }).where(eq(fittings.id, set.fittingId))
      expect(await codeOf(back)).toBe('NW005')
    }
  })

  it('a preset that somebody else reads otherwise makes a signed fitting void; the same one leaves it', async () => {
    const set = await preparedSet(shop)
    const skiId = set.pair.skis.left.id
    const [ski] = await shop.db.select().from(skis).where(eq(skis.id, skiId))
    const read = (toe: number) =>
      shop.as('technician').send(readPreset, {
        skiId,
        version: ski!.presetVersion,
        toe,
        heel: ski!.presetHeel!,
        turns: null,
      })
    const stateNow = async () =>
      (await shop.db.select().from(fittings).where(eq(fittings.id, set.fittingId)))[0]!.state
    expect((await read(ski!.presetToe!)).status).toBe(201)
    expect(await stateNow()).toBe('prepared')
    expect((await read(ski!.presetToe! + 1)).status).toBe(201)
    expect(await stateNow()).toBe('void')
  })
})

describe('facts are added, never changed', () => {
  const facts = [
    'state_changes',
    'preset_changes',
    'fitting_records',
    'fitting_record_parts',
    'hand_overs',
    'returns',
    'inspections',
    'fitting_decisions',
    'ticket_holds',
    'ski_readings',
    'call_back_steps',
    'table_approvals',
    'binding_model_approvals',
    'office_changes',
    'erasures',
  ]

  it.each(facts)(
    '%s: neither the server nor the owner of the schema updates, deletes or empties it',
    async (fact) => {
      // an update or delete of no row fires no trigger: the refusal must not hang on there being rows
      const { rows } = await owner.query(
        `select column_name from information_schema.columns where table_name = $1 limit 1`,
        [fact],
      )
      const column = (rows[0] as { column_name: string }).column_name
      for (const text of [
        `update ${fact} set ${column} = ${column}`,
        `delete from ${fact}`,
        `truncate ${fact} cascade`,
      ]) {
        expect(await codeOf(asApp(text))).toBe('42501')
      }
      expect(await codeOf(owner.query(`truncate ${fact} cascade`))).toBe('NW009')
      const { rows: triggers } = await owner.query(
        `select tgname from pg_trigger where tgrelid = $1::regclass and not tgisinternal and tgenabled = 'O' and tgname in ($2, $3)`,
        [fact, `${fact}_kept`, `${fact}_whole`],
      )
      expect(triggers).toHaveLength(2)
    },
  )

  it('of a set that is out not even the owner of the schema touches a row', async () => {
    await setOut(shop)
    for (const fact of [
      'state_changes',
      'fitting_records',
      'fitting_record_parts',
      'hand_overs',
      'preset_changes',
    ]) {
      expect(await codeOf(owner.query(`delete from ${fact}`))).toBe('NW009')
      expect(await codeOf(owner.query(`update ${fact} set shop_id = shop_id`))).toBe('NW009')
    }
  })

  it('the server’s role writes no state, preset or correction by itself, and changes no table', async () => {
    const { pair, boots, fittingId } = await setOut(shop)
    for (const [text, id] of [
      [`update ski_pairs set state = 'racked' where id = $1`, pair.id],
      [`update ski_pairs set site_id = site_id where id = $1`, pair.id],
      [`update boots set state = 'racked' where id = $1`, boots!.id],
      [`update skis set preset_toe = 1 where ski_pair_id = $1`, pair.id],
      [`update skis set toe_correction = 1 where ski_pair_id = $1`, pair.id],
      [`update fittings set ski_pair_id = ski_pair_id where id = $1`, fittingId],
      [`update fittings set basis = '{}' where id = $1`, fittingId],
      [`delete from ski_pairs where id = $1`, pair.id],
    ] as const) {
      expect(`${text}: ${await codeOf(asApp(text, [id]))}`).toBe(`${text}: 42501`)
    }
    for (const text of [
      'create table extra (id int)',
      'alter table ski_pairs add column extra int',
      'alter table state_changes disable trigger user',
      'drop table labels',
      "insert into lifecycle_edges (from_state, to_state) values ('unchecked', 'claimed')",
      'set session_replication_role = replica',
    ]) {
      expect(`${text}: ${await codeOf(asApp(text))}`).toBe(`${text}: 42501`)
    }
  })

  it('things are born in commissioning, standing nowhere, with no correction', async () => {
    const { id } = await shop.rackedPair()
    const copy = (state: string) =>
      asApp(
        `insert into ski_pairs (shop_id, code, state, home_site_id, site_id, ski_model_id, binding_model_id, length_cm, season)
         select shop_id, 'S9' || substr(code, 2), $2, home_site_id, site_id, ski_model_id, binding_model_id, length_cm, season
         from ski_pairs where id = $1`,
        [id, state],
      )
    for (const state of ['racked', 'out', 'unchecked']) expect(await codeOf(copy(state))).toBe('NW010')
    const ski = asApp(
      `insert into skis (shop_id, ski_pair_id, side, preset_toe, preset_heel) values ($1, $2, 'left', 4, 4)`,
      [shop.id, id],
    )
    expect(await codeOf(ski)).toBe('NW010')
  })
})

describe('nothing in quarantine is edited or given out', () => {
  it('neither the pair, nor its skis, nor its labels, while it is held', async () => {
    const pair = await shop.rackedPair()
    await shop.hold({ kind: 'ski_pair', id: pair.id }, 'racked')
    for (const text of [
      'update ski_pairs set length_cm = 170 where id = $1',
      `update labels set until = now() where item_id = $1`,
      `insert into labels (shop_id, text, item_kind, item_id, side) select shop_id, 'X', 'ski_pair', id, 'left' from ski_pairs where id = $1`,
      `insert into preset_changes (shop_id, ski_id, preset_toe, preset_heel, preset_version, toe_correction, heel_correction, reason, occurred_at)
       select shop_id, id, 1, 1, preset_version + 1, 0, 0, 'read', now() from skis where ski_pair_id = $1 and side = 'left'`,
    ]) {
      expect(`${text}: ${await codeOf(asApp(text, [pair.id]))}`).toBe(`${text}: NW002`)
    }
    expect(
      await codeOf(shop.fitting({ rental: await shop.rental(), pair, boots: await shop.rackedBoots() })),
    ).toBe('NW001')
  })

  it('a hold without reason, owner and review date is no hold, and an old release opens no later one', async () => {
    const pair = await shop.rackedPair()
    const item = { kind: 'ski_pair', id: pair.id } as const
    for (const column of ['reason', 'owner_id', 'review_on']) {
      const { rows } = await owner.query(
        `select is_nullable from information_schema.columns where table_name = 'quarantines' and column_name = $1`,
        [column],
      )
      expect(rows).toEqual([{ is_nullable: 'NO' }])
    }
    const first = await shop.hold(item, 'racked')
    const release = `update quarantines set released_at = now(), released_by = $2, released_to = 'service' where id = $1`
    await asApp(release, [first, shop.people.head_technician.id])
    await shop.change(item, 'quarantine', 'service', { subjectId: first })
    await shop.hold(item, 'service')
    expect(await codeOf(shop.change(item, 'quarantine', 'service', { subjectId: first }))).toBe('NW002')
  })

  it('anybody holds a pair that is claimed: its fitting is void and the boots are back on the rack', async () => {
    const pair = await shop.rackedPair()
    const boots = await shop.rackedBoots()
    const fitting = await shop.fitting({ rental: await shop.rental(), pair, boots })
    const held = await shop.as('counter').send(openQuarantine, {
      itemKind: 'ski_pair',
      itemId: pair.id,
      reason: 'The left heel sounds wrong',
      ownerId: shop.people.head_technician.id,
      reviewOn: '2030-01-31',
    })
    expect(held.status).toBe(201)
    const [after] = await shop.db.select().from(fittings).where(eq(fittings.id, fitting.id))
    expect(after).toMatchObject({ state: 'void', endReason: 'ski_pair_changed' })
    const [shoes] = await shop.db.select().from(bootsTable).where(eq(bootsTable.id, boots.id))
    expect(shoes!.state).toBe('racked')
  })

  it('holding and claiming the same pair at the same moment leaves a held pair without a fitting', async () => {
    for (let round = 0; round < 6; round += 1) {
      const pair = await shop.rackedPair()
      const claim = { rental: await shop.rental(), pair, boots: await shop.rackedBoots() }
      const [held] = await Promise.all([
        shop.as('counter').send(openQuarantine, {
          itemKind: 'ski_pair',
          itemId: pair.id,
          reason: 'Dropped from the rack',
          ownerId: shop.people.head_technician.id,
          reviewOn: '2030-01-31',
        }),
        codeOf(shop.fitting(claim)),
      ])
      expect(held.status).toBe(201)
      const open = sql`${fittings.skiPairId} = ${pair.id} and ${fittings.state} in ('claimed', 'prepared')`
      expect(await shop.db.$count(fittings, open)).toBe(0)
    }
  })
})
