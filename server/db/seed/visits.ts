import { createHash } from 'node:crypto'
import { RULES_VERSION } from '#shared/release/rules'
import { labelFor } from '#shared/labels/labels'
import { readableTurns } from '#shared/track/readBack'
import { targetIndicator } from '#shared/track/targetIndicator'
import type { PartReading } from '#shared/schemas/records'
import { rowStepsOf } from '#shared/fitting/rowSteps'
import { inputsCommitment } from '../../services/commitment'
import {
  fittingInputs,
  fittingRecordParts,
  fittingRecords,
  fittings,
  handOvers,
  presetChanges,
  rentalItems,
  rentals,
  renters,
  signatures,
  skiReadings,
  stateChanges,
  ticketHolds,
} from '../schema/schema'
import type { Chance } from './chance'
import type { DemoBoots, DemoPair } from './fleet'
import { scribble } from './pictures'
import type { DemoMatch, DemoRenter } from './renters'
import type { Rows } from './rows'

const minute = 60_000
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

/** What a ski showed when it was read back: the plan, or now and then one heel notch that the window decided. */
export function addReading(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  fittingId: string,
  match: DemoMatch,
  value: number,
  side: 'left' | 'right',
  at: Date,
  by: string,
) {
  const { pair, target } = match
  const off =
    !pair.track.coupled && !pair.track.fineScrew && target.heel < pair.track.heel.last && chance.happens(0.06)
  const turns =
    pair.track.fineScrew && target.turns !== null
      ? readableTurns(target.turns, pair.track.fineScrew.maxTurns)
      : null
  const reading: PartReading = {
    toe: target.toe,
    heel: target.heel + (off ? 1 : 0),
    turns,
    toeValue: value,
    heelValue: value,
    soleClearance: true,
    forwardPressure: true,
    brake: true,
    function: true,
  }
  const skiId = pair.skiIds[side]
  const presetVersion = pair.presetVersion + 1
  rows.add(presetChanges, {
    id: chance.uuid(),
    shopId: shop.shopId,
    skiId,
    presetToe: reading.toe,
    presetHeel: reading.heel,
    presetTurns: turns,
    presetVersion,
    toeCorrection: 0,
    heelCorrection: 0,
    reason: 'read_back',
    fittingId,
    personId: shop.staff[by],
    occurredAt: at,
    recordedAt: at,
  })
  const verdict = off ? 'window_decides' : 'matches'
  rows.add(skiReadings, {
    id: chance.uuid(),
    shopId: shop.shopId,
    fittingId,
    skiId,
    side,
    reading,
    verdict,
    presetVersion,
    personId: shop.staff[by]!,
    occurredAt: at,
    recordedAt: at,
  })
  return { reading, verdict, presetVersion }
}

/** The signed record over both readings; the fitting's row is completed by its id. */
export function addRecord(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  visit: Visit,
  match: DemoMatch,
  fitting: { id: string; number: number; value: number },
  at: Date,
  by: string,
): string {
  const { pair, boots, setting, target } = match
  const { row, value, sideways, twistNm, forwardLeanNm } = setting
  const recordId = chance.uuid()
  const parts = sides.map((side) => ({
    side,
    ...addReading(rows, chance, shop, fitting.id, match, fitting.value, side, at, by),
  }))
  rows.add(ticketHolds, {
    id: chance.uuid(),
    shopId: shop.shopId,
    fittingId: fitting.id,
    personId: shop.staff[by]!,
    occurredAt: new Date(at.getTime() - 4 * minute),
    recordedAt: at,
  })
  rows.add(fittingRecords, {
    id: recordId,
    shopId: shop.shopId,
    siteId: visit.siteId,
    fittingId: fitting.id,
    number: fitting.number,
    renterId: visit.renterId,
    inputsCommitment: inputsCommitment(visit.salt, { ...visit.renter, request: 0 }),
    inputsHash: '',
    edition: 'eight-column',
    rulesVersion: RULES_VERSION,
    approved: false,
    row,
    value,
    sideways,
    twistNm,
    forwardLeanNm,
    rowSteps: rowStepsOf(setting.steps),
    skiPairId: pair.id,
    skiPairCode: pair.code,
    bindingModelId: pair.bindingModelId,
    bindingModelName: pair.bindingName,
    bindingContentSha256: '',
    bootsId: boots.id,
    bootsCode: boots.code,
    bootsOwner: 'shop',
    soleLengthMm: boots.soleLengthMm,
    soleType: boots.soleType,
    targetToe: target.toe,
    targetHeel: target.heel,
    targetTurns: target.turns,
    decisionIds: [],
    signedBy: shop.staff[by]!,
    signedAt: at,
    recordedAt: at,
  })
  for (const part of parts) {
    rows.add(fittingRecordParts, {
      id: chance.uuid(),
      shopId: shop.shopId,
      recordId,
      skiId: pair.skiIds[part.side],
      side: part.side,
      label: labelFor(pair.code, part.side),
      targetToeValue: fitting.value,
      targetHeelValue: fitting.value,
      reading: part.reading,
      verdict: part.verdict,
      presetVersion: part.presetVersion,
      readBy: shop.staff[by]!,
      readAt: at,
    })
  }
  const last = parts.at(-1)!.reading
  pair.preset = { toe: last.toe, heel: last.heel, turns: last.turns }
  pair.presetVersion += 1
  move(rows, chance, shop, pair, 'ski_pair', 'prepared', at, { subjectId: fitting.id, by })
  move(rows, chance, shop, boots, 'boots', 'prepared', at, { subjectId: fitting.id, by })
  return recordId
}

/** The renter read the numbers and signed; skis and boots are out. */
export function addHandOver(
  rows: Rows,
  chance: Chance,
  shop: DemoShop,
  visit: Visit,
  match: DemoMatch,
  fittingId: string,
  recordId: string,
  at: Date,
) {
  const { pair, boots } = match
  const handOverId = chance.uuid()
  const picture = scribble(chance)
  const minor = visit.renter.age < 18
  rows.add(handOvers, {
    id: handOverId,
    shopId: shop.shopId,
    siteId: visit.siteId,
    fittingId,
    recordId,
    rentalId: visit.rentalId,
    signatureSha256: createHash('sha256').update(picture).digest('hex'),
    signedAs: minor ? 'guardian' : 'renter',
    textId: shop.textId,
    textVersion: 1,
    textSha256: shop.textSha256,
    personId: shop.staff.counter!,
    occurredAt: at,
    recordedAt: at,
  })
  rows.add(signatures, {
    id: chance.uuid(),
    shopId: shop.shopId,
    renterId: visit.renterId,
    handOverId,
    picture,
    signedName: `${visit.renter.firstName} ${visit.renter.lastName}`,
    createdAt: at,
  })
  move(rows, chance, shop, pair, 'ski_pair', 'out', at, { subjectId: fittingId, by: 'counter' })
  move(rows, chance, shop, boots, 'boots', 'out', at, { subjectId: fittingId, by: 'counter' })
  return {
    itemRows: (
      back: { at: Date; returnIds: Record<string, string> } | null,
      missing: readonly string[] = [],
    ) => {
      for (const [kind, item] of [
        ['ski_pair', pair],
        ['boots', boots],
      ] as const) {
        for (const side of sides) {
          const isBack = back !== null && !missing.includes(`${kind} ${side}`)
          rows.add(rentalItems, {
            id: chance.uuid(),
            shopId: shop.shopId,
            rentalId: visit.rentalId,
            fittingId,
            itemKind: kind,
            itemId: item.id,
            side,
            outAt: at,
            backAt: isBack ? back.at : null,
            returnId: isBack ? back.returnIds[`${kind} ${side}`] : null,
          })
        }
      }
    },
  }
}
