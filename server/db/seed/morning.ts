import { callBacks, callBackSteps, fittings, inspections, quarantines } from '../schema/schema'
import type { Chance } from './chance'
import { ago, dayFrom } from './days'
import type { DemoBoots, DemoFleet, DemoPair } from './fleet'
import { inventRenter, matchFor, type DemoMatch } from './renters'
import type { Rows } from './rows'
import { addReturns, completeFitting } from './season'
import { addHandOver, addReading, addRecord } from './signed'
import { addArrival, addFitting, move, type DemoShop, type Visit } from './visits'

interface Morning {
  rows: Rows
  chance: Chance
  shop: DemoShop
  fleet: DemoFleet
  siteIds: [string, string]
  now: Date
}

const racked = (item: DemoPair | DemoBoots) => item.state === 'racked'

/** The morning in progress: people at every station, a few things that went wrong, dated back from now. */
export function addMorning(morning: Morning) {
  for (let i = 0; i < 56; i += 1) addOut(morning)
  addLate(morning, 1)
  addLate(morning, 3)
  addUnchecked(morning, 9)
  addShelved(morning)
  addCallBack(morning)
  for (const minutes of [16, 11, 6]) addPrepared(morning, minutes)
  for (const [index, minutes] of [44, 27, 22, 17, 13, 9, 5].entries()) addTicket(morning, minutes, index)
  for (const minutes of [15, 12, 8]) arrive(morning, minutes, 'open')
  for (const minutes of [9, 6, 4, 2, 1]) arrive(morning, minutes, 'waiting')
}

function arrive(
  { rows, chance, shop, siteIds, now }: Morning,
  minutesAgo: number,
  state: string,
  renter = inventRenter(chance),
  days = chance.pick([0, 0, 1, 2, 5]),
): Visit {
  return addArrival(rows, chance, shop, {
    renter,
    siteId: siteIds[chance.happens(0.75) ? 0 : 1],
    arrivedAt: ago(now, minutesAgo),
    state,
    days: { from: dayFrom(now, 0), to: dayFrom(now, days) },
  })
}

/** Somebody for whom the shop has boots and a pair. */
function someone({ fleet, chance }: Morning): { renter: Visit['renter']; match: DemoMatch } {
  for (;;) {
    const renter = inventRenter(chance)
    const match = matchFor(renter, fleet, racked, chance)
    if (match) return { renter, match }
  }
}

function addTicket(morning: Morning, minutesAgo: number, index: number) {
  const { rows, chance, shop, now } = morning
  const { renter, match } = someone(morning)
  const visit = arrive(morning, minutesAgo, 'open', renter)
  const fitting = addFitting(rows, chance, shop, visit, match, ago(now, minutesAgo - 4), 'claimed')
  if (index !== 1) return
  // One ticket is half done: its left ski is read, its right ski is not.
  addReading(rows, chance, shop, fitting.id, match, fitting.value, 'left', ago(now, 2), 'technician')
  rows.patch(fittings, fitting.id, { heldBy: shop.staff.technician, heldSince: ago(now, 5) })
}

function addPrepared(morning: Morning, minutesAgo: number) {
  const { rows, chance, shop, now } = morning
  const { renter, match } = someone(morning)
  const visit = arrive(morning, minutesAgo + 14, 'open', renter)
  const fitting = addFitting(rows, chance, shop, visit, match, ago(now, minutesAgo + 9), 'prepared')
  const recordId = addRecord(rows, chance, shop, visit, match, fitting, ago(now, minutesAgo), 'technician')
  completeFitting(rows, fitting.id, recordId, ago(now, minutesAgo), null)
}

/** A set handed over earlier, as far as the hand-over; the caller says what is back. */
function handedOver(morning: Morning, minutesAgo: number, days: { from: number; to: number }, state: string) {
  const { rows, chance, shop, siteIds, now } = morning
  const { renter, match } = someone(morning)
  const arrivedAt = ago(now, minutesAgo)
  const visit = addArrival(rows, chance, shop, {
    renter,
    siteId: siteIds[chance.happens(0.75) ? 0 : 1],
    arrivedAt,
    state,
    days: { from: dayFrom(now, days.from), to: dayFrom(now, days.to) },
  })
  const fitting = addFitting(rows, chance, shop, visit, match, ago(now, minutesAgo - 6), 'handed_over')
  const recordId = addRecord(
    rows,
    chance,
    shop,
    visit,
    match,
    fitting,
    ago(now, minutesAgo - 14),
    chance.pick(['technician', 'bench']),
  )
  completeFitting(rows, fitting.id, recordId, ago(now, minutesAgo - 14), ago(now, minutesAgo - 22))
  const out = addHandOver(rows, chance, shop, visit, match, fitting.id, recordId, ago(now, minutesAgo - 22))
  return { visit, match, fitting, recordId, out }
}

const dayMinutes = 24 * 60

function addOut(morning: Morning) {
  const { chance } = morning
  const started = chance.pick([0, 0, 0, 1, 2])
  const minutesAgo = started === 0 ? chance.int(40, 150) : started * dayMinutes + chance.int(-60, 200)
  handedOver(morning, minutesAgo, { from: -started, to: chance.int(0, 3) }, 'out').out.itemRows(null)
}

function addLate(morning: Morning, daysLate: number) {
  handedOver(
    morning,
    (daysLate + 2) * dayMinutes,
    { from: -daysLate - 2, to: -daysLate },
    'out',
  ).out.itemRows(null)
}

/** What came back and waits to be cleared; of the first pair only the left ski came. */
function addUnchecked(morning: Morning, count: number) {
  const { rows, chance, shop, now } = morning
  for (let i = 0; i < count; i += 1) {
    const missing = i === 0 ? ['ski_pair right'] : []
    const { visit, match, out } = handedOver(
      morning,
      dayMinutes + chance.int(0, 90),
      { from: -1, to: 0 },
      missing.length ? 'out' : 'returned',
    )
    const at = ago(now, 6 + i * 7)
    out.itemRows({ at, returnIds: addReturns(rows, chance, shop, visit, match, at, missing) }, missing)
  }
}

/** Things in the workshop, withdrawn, and held. */
function addShelved({ rows, chance, shop, fleet, now }: Morning) {
  const pairs = fleet.pairs.filter(racked)
  for (let i = 0; i < 4; i += 1)
    move(rows, chance, shop, pairs[i * 31]!, 'ski_pair', 'service', ago(now, 1500 + i * 400), {
      reason: 'Edge to be ground',
    })
  for (let i = 0; i < 2; i += 1) {
    const pair = pairs[7 + i * 41]!
    const [found, at] = [ago(now, 4300 + i * 900), ago(now, 4200 + i * 900)]
    move(rows, chance, shop, pair, 'ski_pair', 'unchecked', found, { reason: 'Found broken on the rack' })
    const id = chance.uuid()
    rows.add(inspections, {
      id,
      shopId: shop.shopId,
      itemKind: 'ski_pair',
      itemId: pair.id,
      verdict: 'withdraw',
      note: 'Toe housing cracked, right ski',
      personId: shop.staff.technician!,
      checks: {
        edge: 'sound',
        base: 'sound',
        brake: 'sound',
        heel: 'sound',
        toe: 'fault',
        slide_plate: 'sound',
        screws: 'sound',
      },
      occurredAt: at,
      recordedAt: at,
    })
    move(rows, chance, shop, pair, 'ski_pair', 'withdrawn', at, { subjectId: id })
  }
  const holds = [
    {
      item: pairs[100]!,
      kind: 'ski_pair' as const,
      reason: 'Renter fell; the left heel is said not to have opened',
      back: 2,
    },
    {
      item: fleet.boots.filter(racked)[50]!,
      kind: 'boots' as const,
      reason: 'Sole length on the shell cannot be read',
      back: 1,
    },
  ]
  for (const { item, kind, reason, back } of holds) {
    const [id, at] = [chance.uuid(), ago(now, back * dayMinutes + 77)]
    rows.add(quarantines, {
      id,
      shopId: shop.shopId,
      itemKind: kind,
      itemId: item.id,
      reason,
      ownerId: shop.staff.head!,
      reviewOn: dayFrom(now, 7 - back),
      openedBy: shop.staff.counter,
      openedAt: at,
    })
    move(rows, chance, shop, item, kind, 'quarantine', at, { subjectId: id, by: 'counter', reason })
  }
}

/** Somebody is out on boots whose sole length was typed wrong; the shop tried to call. */
function addCallBack(morning: Morning) {
  const { rows, chance, shop, now } = morning
  const { visit, fitting, recordId, out } = handedOver(morning, 190, { from: 0, to: 2 }, 'out')
  out.itemRows(null)
  const id = chance.uuid()
  const triedAt = ago(now, 18)
  rows.add(callBacks, {
    id,
    shopId: shop.shopId,
    fittingId: fitting.id,
    rentalId: visit.rentalId,
    recordId,
    cause: 'record_error',
    openedBy: shop.staff.head,
    openedAt: ago(now, 31),
    detail: 'The heel value of the left ski was read at the other pair.',
    lastStep: 'tried',
    lastStepAt: triedAt,
    stepCount: 1,
  })
  rows.add(callBackSteps, {
    id: chance.uuid(),
    shopId: shop.shopId,
    callBackId: id,
    step: 'tried',
    note: 'No answer, message left.',
    personId: shop.staff.counter!,
    occurredAt: triedAt,
    recordedAt: triedAt,
  })
}
