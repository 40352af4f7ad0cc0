import { randomUUID } from 'node:crypto'
import { sql } from 'drizzle-orm'
import { beforeAll, describe, expect, it } from 'vitest'
import type { PersonActor } from '../../server/services/actor'
import { runCommand } from '../../server/services/commands'
import { lockItem, type ItemRef } from '../../server/services/stateChanges'
import { testShop, type TestShop } from '../support/shop'

let shop: TestShop
beforeAll(async () => {
  shop = await testShop()
})

const actor = (): PersonActor => ({
  kind: 'person',
  shopId: shop.id,
  personId: shop.people.counter.id,
  roles: ['counter'],
  deviceId: null,
  siteId: null,
})
const envelope = () => ({
  id: randomUUID(),
  occurredAt: new Date().toISOString(),
  seenSeq: null,
  kind: 'tests.lock',
  body: {},
})

describe('two commands that wait for each other', () => {
  it('both take effect, each once: the one that PostgreSQL ends is done anew', async () => {
    const [first, second] = [await shop.rackedBoots(), await shop.rackedBoots()]
    const refs = [first, second].map(({ id }): ItemRef => ({ kind: 'boots', id }))
    let met = 0
    let meet = () => {}
    const bothHoldOne = new Promise<void>((resolve) => (meet = resolve))
    let runs = 0
    const locking = (order: ItemRef[]) =>
      runCommand(shop.app.deps, actor(), envelope(), async (context) => {
        runs += 1
        await lockItem(context.tx, shop.id, order[0]!)
        if ((met += 1) === 2) meet()
        await bothHoldOne
        await lockItem(context.tx, shop.id, order[1]!)
        context.touchItem('boots', order[1]!.id)
        return {}
      })
    const answers = await Promise.all([locking(refs), locking([...refs].reverse())])
    expect(answers.every(({ seq }) => seq !== null)).toBe(true)
    expect(runs).toBe(3)
    const { rows } = await shop.db.execute(
      sql`select count(*)::int n from command_log where kind = 'tests.lock' and status = 200`,
    )
    expect(rows).toEqual([{ n: 2 }])
  })
})
