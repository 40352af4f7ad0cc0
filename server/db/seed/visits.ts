import { RULES_VERSION } from '#shared/release/rules'
import { targetIndicator } from '#shared/track/targetIndicator'
import { rowStepsOf } from '#shared/fitting/rowSteps'
import { fittingInputs, fittings, rentals, renters, stateChanges } from '../schema/schema'
import type { Chance } from './chance'
import { minute } from './days'
import type { DemoBoots, DemoPair } from './fleet'
import type { DemoMatch, DemoRenter } from './renters'
import type { Rows } from './rows'

export const sides = ['left', 'right'] as const

export interface DemoShop {
  shopId: string
  staff: Record<string, string>
  textId: string
  textSha256: string
  numbers: { fitting: number; day: Map<string, number> }
}

export interface Visit {
  renter: DemoRenter
  siteId: string
  renterId: string
  inputsId: string
  rentalId: string
  salt: Buffer
  arrivedAt: Date
}

/** The shoe size that goes with a foot, in Paris points of two thirds of a centimetre (common practice, no source). */
const euSize = (mondo: number) => String(Math.round((mondo / 10 + 1.5) * 1.5))

/** Renter, inputs and rental, as the form and the desk leave them. */
export function addArrival(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  visit: {
    renter: DemoRenter
    siteId: string
    arrivedAt: Date
    state: string
    days: { from: string; to: string }
    promiseMinutes?: number
  },
): Visit {
  const { renter, arrivedAt } = visit
  const [renterId, inputsId, rentalId, salt] = [chance.uuid(), chance.uuid(), chance.uuid(), chance.bytes(16)]
  const number = (shop.numbers.day.get(visit.days.from) ?? 0) + 1
  shop.numbers.day.set(visit.days.from, number)
  const minor = renter.age < 18
  const measured = chance.happens(0.5)
  rows.add(renters, {
    id: renterId,
    shopId: shop.shopId,
    firstName: renter.firstName,
    lastName: renter.lastName,
    email: `${renter.firstName}.${renter.lastName}@post.example`.toLowerCase(),
    phone: `+00 555 ${chance.int(1000, 9999)}`,
    locale: chance.happens(0.6) ? 'de' : 'en',
    birthDate: null,
    guardianName: minor ? `${chance.pick(['Runa', 'Albin', 'Mirela', 'Joos'])} ${renter.lastName}` : null,
    guardianRelation: minor ? 'parent' : null,
    guardianPhone: null,
    currentInputsId: inputsId,
    createdAt: arrivedAt,
  })
  rows.add(fittingInputs, {
    id: inputsId,
    shopId: shop.shopId,
    renterId,
    salt,
    mass: renter.mass,
    massSource: measured ? 'measured' : 'declared',
    massBy: measured ? shop.staff.counter : null,
    height: renter.height,
    heightSource: 'declared',
    heightBy: null,
    age: renter.age,
    skierType: renter.skierType,
    request: 0,
    createdAt: arrivedAt,
  })
  rows.add(rentals, {
    id: rentalId,
    shopId: shop.shopId,
    siteId: visit.siteId,
    renterId,
    day: visit.days.from,
    number,
    state: visit.state,
    startsOn: visit.days.from,
    endsOn: visit.days.to,
    ownBoots: false,
    shoe: chance.happens(0.85) ? { size: euSize(renter.mondo), system: 'eu' } : null,
    wishes: '',
    arrivedAt,
    promisedAt: new Date(arrivedAt.getTime() + (visit.promiseMinutes ?? 20) * minute),
    takenBy: visit.state === 'waiting' ? null : shop.staff.counter,
    takenAt: visit.state === 'waiting' ? null : arrivedAt,
    createdAt: arrivedAt,
  })
  return { renter, siteId: visit.siteId, renterId, inputsId, rentalId, salt, arrivedAt }
}

/** A claimed fitting: boots and pair are taken. Answers its id. */
export function addFitting(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  visit: Visit,
  match: DemoMatch,
  claimedAt: Date,
  state: string,
) {
  const { pair, boots, setting, target } = match
  const id = chance.uuid()
  shop.numbers.fitting += 1
  const indicator = targetIndicator(pair.track, setting.value)
  const unit = { toe: indicator.value, heel: indicator.value }
  const { row, value, sideways, twistNm, forwardLeanNm } = setting
  rows.add(fittings, {
    id,
    shopId: shop.shopId,
    siteId: visit.siteId,
    number: shop.numbers.fitting,
    rentalId: visit.rentalId,
    renterId: visit.renterId,
    inputsId: visit.inputsId,
    skiPairId: pair.id,
    bootsId: boots.id,
    state,
    soleLengthMm: boots.soleLengthMm,
    release: { row, value, sideways, twistNm, forwardLeanNm, rowSteps: rowStepsOf(setting.steps) },
    value,
    track: { ok: true, ...target, moves: null },
    targets: { left: unit, right: unit },
    edition: 'eight-column',
    rulesVersion: RULES_VERSION,
    approved: false,
    decisionIds: [],
    promisedAt: new Date(visit.arrivedAt.getTime() + 20 * minute),
    claimedBy: shop.staff.counter!,
    claimedAt,
    heldBy: null,
    heldSince: null,
    recordId: null,
    preparedAt: null,
    endedAt: null,
    endReason: null,
    recordedAt: claimedAt,
    basis: {},
    inputsHash: '',
  })
  move(rows, chance, shop, pair, 'ski_pair', 'claimed', claimedAt, { subjectId: id, by: 'counter' })
  move(rows, chance, shop, boots, 'boots', 'claimed', claimedAt, { subjectId: id, by: 'counter' })
  return { id, number: shop.numbers.fitting, value: indicator.value }
}

/** One state change of an item; the item object remembers where it is. */
export function move(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  item: DemoPair | DemoBoots,
  itemKind: 'ski_pair' | 'boots',
  to: string,
  at: Date,
  {
    subjectId = null,
    by = 'technician',
    reason = null,
  }: { subjectId?: string | null; by?: string; reason?: string | null } = {},
) {
  item.itemSeq += 1
  rows.add(stateChanges, {
    id: chance.uuid(),
    shopId: shop.shopId,
    itemKind,
    itemId: item.id,
    fromState: item.state,
    toState: to,
    siteId: item.siteId,
    rackPlace: to === 'racked' ? item.rackPlace : null,
    reason,
    subjectId,
    personId: shop.staff[by],
    itemSeq: item.itemSeq,
    occurredAt: at,
    recordedAt: at,
  })
  item.state = to
  item.since = at
}
