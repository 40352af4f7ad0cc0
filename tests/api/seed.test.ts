import { sql } from 'drizzle-orm'
import { beforeAll, describe, expect, it, vi } from 'vitest'
import { hashSecret } from '../../server/auth/passwords'
import { seedDemo } from '../../server/db/seed/seedDemo'
import { testDatabase, type TestDatabase } from '../support/database'

// The real hashing, counted.
vi.mock('../../server/auth/passwords', async (original) => {
  const real = await original<typeof import('../../server/auth/passwords')>()
  return { ...real, hashSecret: vi.fn(real.hashSecret) }
})

const today = new Date('2026-01-17T09:40:00Z')
const one = async (db: TestDatabase['db'], query: ReturnType<typeof sql>) => (await db.execute(query)).rows[0]

describe('the demo shop', () => {
  let database: TestDatabase

  beforeAll(async () => {
    database = await testDatabase()
    await seedDemo({ ownerUrl: database.ownerUrl, today })
  })

  it('has a fleet, a season behind it, and people at every station', async () => {
    const counts = await one(
      database.db,
      sql`select (select count(*)::int from ski_pairs) pairs, (select count(*)::int from boots) boots, (select count(*)::int from sites) sites,
        (select count(*)::int from fitting_records where signed_at < '2025-12-01') season,
        (select count(*)::int from rentals where state = 'waiting') waiting, (select count(*)::int from fittings where state = 'claimed') bench,
        (select count(*)::int from fittings where state = 'prepared') ready, (select count(*)::int from call_backs where closed_at is null) "callBacks",
        (select count(*)::int from quarantines where released_at is null) held`,
    )
    expect(counts).toMatchObject({
      pairs: 550,
      boots: 650,
      sites: 2,
      waiting: 5,
      bench: 7,
      ready: 3,
      callBacks: 1,
      held: 2,
    })
    expect(counts!.season).toBeGreaterThan(800)
  })

  it('holds every item in the state of its latest change, and every unit where it was last read', async () => {
    const wrong = await one(
      database.db,
      sql`select (select count(*)::int from (select id, state from ski_pairs union all select id, state from boots) i
          where state is distinct from (select to_state from state_changes c where c.item_id = i.id order by item_seq desc limit 1)) items,
        (select count(*)::int from skis s where preset_version is distinct from (select max(preset_version) from preset_changes c where c.ski_id = s.id)) presets,
        (select count(*)::int from state_changes c where not exists (select from lifecycle_edges e where e.from_state = c.from_state and e.to_state = c.to_state)) edges,
        (select count(*)::int from (select from_state, lag(to_state) over (partition by item_id order by item_seq) before from state_changes) c
          where before is not null and before <> from_state) gaps`,
    )
    expect(wrong).toEqual({ items: 0, presets: 0, edges: 0, gaps: 0 })
  })

  it('has an open fitting for exactly the items that are claimed or prepared', async () => {
    const wrong = await one(
      database.db,
      sql`select count(*)::int n from (select id, state from ski_pairs union all select id, state from boots) i
        full join (select unnest(array[ski_pair_id, boots_id]) id, state from fittings where state in ('claimed', 'prepared')) f using (id)
        where (case when i.state in ('claimed', 'prepared') then i.state end) is distinct from f.state`,
    )
    expect(wrong).toEqual({ n: 0 })
  })

  it('is the same shop for the same seed and moment, and another for another seed', async () => {
    const print = async ({ db }: TestDatabase) => {
      const changes = sql`select md5(string_agg(id || to_state, ',' order by item_id, item_seq)) print from state_changes`
      return (await one(db, changes))!.print
    }
    const seeded = async (seed?: number) => {
      const other = await testDatabase()
      await seedDemo({ ownerUrl: other.ownerUrl, today, seed })
      return print(other)
    }
    const here = await print(database)
    expect(await seeded()).toBe(here)
    expect(await seeded(418)).not.toBe(here)
    // Two whole shops are made: on a busy machine that takes its time.
  }, 120_000)

  it('is left alone when it is already there, and a warm start hashes no password for it', async () => {
    expect(hashSecret).toHaveBeenCalled()
    vi.mocked(hashSecret).mockClear()
    await seedDemo({ ownerUrl: database.ownerUrl, today })
    expect(hashSecret).not.toHaveBeenCalled()
    expect(await one(database.db, sql`select count(*)::int n from shops`)).toEqual({ n: 1 })
  })
})
