import { createHash } from 'node:crypto'
import { RULES_VERSION } from '#shared/release/rules'
import { labelFor } from '#shared/labels/labels'
import { readableTurns } from '#shared/track/readBack'
import type { PartReading } from '#shared/schemas/records'
import { rowStepsOf } from '#shared/fitting/rowSteps'
import { inputsCommitment } from '../../services/commitment'
import {
  fittingRecordParts,
  fittingRecords,
  handOvers,
  presetChanges,
  rentalItems,
  signatures,
  skiReadings,
  ticketHolds,
} from '../schema/schema'
import type { Chance } from './chance'
import { minute } from './days'
import { scribble } from './pictures'
import type { DemoMatch } from './renters'
import type { Rows } from './rows'
import { move, sides, type DemoShop, type Visit } from './visits'

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
