import { fittings, inspections, returns } from '../schema/schema'
import type { Chance } from './chance'
import { dayFrom, minute } from './days'
import type { DemoBoots, DemoFleet, DemoPair } from './fleet'
import { inventRenter, matchFor, type DemoMatch } from './renters'
import type { Rows } from './rows'
import { addHandOver, addRecord } from './signed'
import { addArrival, addFitting, move, sides, type DemoShop, type Visit } from './visits'

const skiSound = {
  edge: 'sound',
  base: 'sound',
  brake: 'sound',
  heel: 'sound',
  toe: 'sound',
  slide_plate: 'sound',
  screws: 'sound',
} as const
const bootSound = { sole_wear: 'sound', buckles: 'sound', shell: 'sound', liner: 'sound' } as const

/** One whole visit of last season: from the form to the cleared item back on its rack. */
export function addPastVisit(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  fleet: DemoFleet,
  siteIds: [string, string],
  arrivedAt: Date,
  day: string,
  endDay: string,
  backAt: Date,
) {
  const renter = inventRenter(chance)
  const match = matchFor(renter, fleet, (item) => item.freeFrom <= arrivedAt.getTime(), chance)
  if (!match) return
  const after = (minutes: number) => new Date(arrivedAt.getTime() + minutes * minute)
  const visit = addArrival(rows, chance, shop, {
    renter,
    siteId: chance.pick(siteIds),
    arrivedAt,
    state: 'returned',
    days: { from: day, to: endDay },
  })
  const fitting = addFitting(rows, chance, shop, visit, match, after(chance.int(3, 8)), 'handed_over')
  const by = chance.pick(['technician', 'technician', 'bench', 'head'])
  const recordId = addRecord(rows, chance, shop, visit, match, fitting, after(chance.int(9, 16)), by)
  const handed = addHandOver(
    rows,
    chance,
    shop,
    visit,
    match,
    fitting.id,
    recordId,
    after(chance.int(17, 28)),
  )
  completeFitting(rows, fitting.id, recordId, after(16), after(28))
  handed.itemRows({ at: backAt, returnIds: addReturns(rows, chance, shop, visit, match, backAt) })
  clearItems(rows, chance, shop, match, new Date(backAt.getTime() + chance.int(20, 120) * minute), by)
  for (const item of [match.pair, match.boots]) item.freeFrom = backAt.getTime() + 3 * 60 * minute
}

/** The three facts that its row learns later. */
export function completeFitting(
  rows: Rows,
  fittingId: string,
  recordId: string | null,
  preparedAt: Date | null,
  endedAt: Date | null,
) {
  rows.patch(fittings, fittingId, { recordId, preparedAt, endedAt })
}

export function addReturns(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  visit: Visit,
  { pair, boots }: DemoMatch,
  at: Date,
  missing: readonly string[] = [],
) {
  const ids: Record<string, string> = {}
  for (const [kind, item] of [
    ['ski_pair', pair],
    ['boots', boots],
  ] as const) {
    const back = sides.filter((side) => !missing.includes(`${kind} ${side}`))
    back.forEach((side, index) => {
      const id = chance.uuid()
      ids[`${kind} ${side}`] = id
      rows.add(returns, {
        id,
        shopId: shop.shopId,
        siteId: item.siteId,
        itemKind: kind,
        itemId: item.id,
        side,
        rentalId: visit.rentalId,
        stateBefore: index === 0 ? 'out' : 'unchecked',
        personId: shop.staff.desk,
        occurredAt: at,
        recordedAt: at,
      })
    })
    if (back.length > 0) move(rows, chance, shop, item, kind, 'unchecked', at, { by: 'desk' })
  }
  return ids
}

function clearItems(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  { pair, boots }: DemoMatch,
  at: Date,
  by: string,
) {
  clearItem(rows, chance, shop, pair, 'ski_pair', at, by)
  clearItem(rows, chance, shop, boots, 'boots', at, by)
}

function clearItem(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  item: DemoPair | DemoBoots,
  itemKind: 'ski_pair' | 'boots',
  at: Date,
  by: string,
) {
  const checks =
    itemKind === 'ski_pair'
      ? { ...skiSound, ...(chance.happens(0.12) ? { edge: 'put_right' as const } : {}) }
      : bootSound
  const id = chance.uuid()
  rows.add(inspections, {
    id,
    shopId: shop.shopId,
    itemKind,
    itemId: item.id,
    checks,
    verdict: 'rack',
    note: '',
    personId: shop.staff[by]!,
    occurredAt: at,
    recordedAt: at,
  })
  move(rows, chance, shop, item, itemKind, 'racked', at, { subjectId: id, by })
}

/** Last season's days, oldest first: more people at the weekend, most sets for one to three days. */
export function addSeason(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  fleet: DemoFleet,
  siteIds: [string, string],
  now: Date,
) {
  const days = 100
  for (let back = days + 230; back > 230; back -= 1) {
    const day = dayFrom(now, -back)
    const visits = chance.int(6, 10) + (back % 7 < 2 ? 9 : 0)
    for (let i = 0; i < visits; i += 1) {
      const length = chance.pick([1, 1, 2, 3, 6])
      const arrivedAt = new Date(
        Date.parse(`${day}T07:10:00Z`) + Math.floor((i / visits) * 240) * minute + chance.int(0, 9) * minute,
      )
      const endDay = dayFrom(now, -back + length - 1)
      addPastVisit(
        rows,
        chance,
        shop,
        fleet,
        siteIds,
        arrivedAt,
        day,
        endDay,
        new Date(Date.parse(`${endDay}T14:20:00Z`) + chance.int(0, 110) * minute),
      )
    }
  }
}
