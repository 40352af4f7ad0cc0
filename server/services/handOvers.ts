import { createHash } from 'node:crypto'
import { and, eq, inArray, isNull } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type { recordHandOver } from '#shared/api/handOvers'
import type { ShopText } from '#shared/api/shop'
import { labelFor, parseTyped, sidedCode } from '#shared/labels/labels'
import type { Side } from '#shared/schemas/common'
import { guardianSigns } from '../db/queries/handOvers'
import {
  boots,
  fittings,
  handOvers,
  labels,
  rentalItems,
  rentals,
  signatures,
  skiPairs,
} from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'
import { itemsOf, lockFitting } from './doubt'
import { acknowledgementInForce } from './handOverToSign'
import { imageFromDataUrl } from './pictures'
import { changeState, lockItems } from './stateChanges'
import { requireUsable } from './texts'

type Body = BodyOf<typeof recordHandOver>
type Context = CommandContext<PersonActor>
type Fitting = typeof fittings.$inferSelect

const sides = ['left', 'right'] as const

/**
 * The set leaves: both skis and both boots are exactly this fitting's, the renter (or a minor's guardian) read the
 * numbers and signed the text that is in force, which the shop has reviewed. The database refuses it when anything
 * changed since the bench.
 */
export const recordHandOverService: Service<Body, IdsOf<typeof recordHandOver>, PersonActor> = async (
  context,
  body,
) => {
  const fitting = await lockPrepared(context, body.fittingId)
  const items = await lockItems(context.tx, context.actor.shopId, itemsOf(fitting))
  await requireExactly(context, fitting, body)
  await requireSigner(context, fitting, body)
  const text = await acknowledgementInForce(context.tx, context.actor.shopId, body.textId)
  if (!text) throw new Problem('handOvers.text')
  await requireUsable(context.tx, context.actor.shopId, text)
  const handOverId = await insertHandOver(context, fitting, body, text)
  for (const item of items) {
    const { siteId, state: from } = item
    await changeState(context, item, { from, to: 'out', siteId, subjectId: fitting.id })
  }
  await noteWhatIsOut(context, fitting)
  await context.tx
    .update(fittings)
    .set({ state: 'handed_over', endedAt: context.occurredAt })
    .where(eq(fittings.id, fitting.id))
  await context.tx.update(rentals).set({ state: 'out' }).where(eq(rentals.id, fitting.rentalId))
  context.touchFitting(fitting.id)
  context.touchRental(fitting.rentalId)
  return { handOverId }
}

async function lockPrepared(context: Context, fittingId: string) {
  const fitting = await lockFitting(context, fittingId)
  const { state, recordId } = fitting
  if (state === 'handed_over') throw new Problem('handOvers.done')
  if (state === 'void') throw new Problem('fittings.void', { reason: fitting.endReason })
  if (state === 'claimed') throw new Problem('fittings.unread', { sides: [...sides] })
  if (state !== 'prepared' || !recordId) throw new Problem('fittings.not_open', { state })
  return { ...fitting, recordId }
}

/** Not one more, not one less, not another's: a mixed pair leaves nobody's hands. */
async function requireExactly(context: Context, fitting: Fitting, body: Body) {
  const expected = await expectedCodes(context, fitting)
  const scanned = await scannedCodes(context, body.labels)
  const missing = expected.filter((code) => !scanned.includes(code))
  const others = scanned.filter((code) => !expected.includes(code))
  if (missing.length > 0 || others.length > 0 || scanned.length !== expected.length) {
    throw new Problem('handOvers.wrong_item', { expected: missing, scanned: others })
  }
  if (fitting.bootsId) return
  const { soleLengthReadMm = null } = body
  if (soleLengthReadMm !== fitting.soleLengthMm) {
    throw new Problem('handOvers.sole_differs', { read: soleLengthReadMm, expected: fitting.soleLengthMm })
  }
}

async function expectedCodes({ tx }: Context, { skiPairId, bootsId }: Fitting): Promise<string[]> {
  const [pair] = await tx.select({ code: skiPairs.code }).from(skiPairs).where(eq(skiPairs.id, skiPairId))
  const [shoes] = bootsId
    ? await tx.select({ code: boots.code }).from(boots).where(eq(boots.id, bootsId))
    : []
  return [pair!, ...(shoes ? [shoes] : [])].flatMap(({ code }) => sides.map((side) => sidedCode(code, side)))
}

/** What the scanned labels hang on now, as people call it: `S417L`. A label that is on nothing names nothing. */
async function scannedCodes({ tx, actor }: Context, texts: string[]): Promise<string[]> {
  const asLabels = [...new Set(texts.map(labelText))]
  const found = await tx
    .select({ text: labels.text, side: labels.side, pair: skiPairs.code, boots: boots.code })
    .from(labels)
    .leftJoin(skiPairs, eq(skiPairs.id, labels.itemId))
    .leftJoin(boots, eq(boots.id, labels.itemId))
    .where(and(eq(labels.shopId, actor.shopId), inArray(labels.text, asLabels), isNull(labels.until)))
  return asLabels.map((text) => {
    const label = found.find((each) => each.text === text)
    return label ? sidedCode(label.pair ?? label.boots ?? '', label.side as Side) : text
  })
}

/** A code typed by hand may lack its check character; a label's text has it. */
function labelText(text: string): string {
  const parsed = parseTyped(text)
  if (!parsed.ok) return text
  return parsed.checked || !parsed.side ? parsed.text : labelFor(parsed.code, parsed.side)
}

async function requireSigner({ tx }: Context, fitting: Fitting, { signedAs }: Body) {
  if (signedAs === 'renter' && (await guardianSigns(tx, fitting.id))) throw new Problem('handOvers.guardian')
}

async function insertHandOver(
  context: Context,
  fitting: Fitting & { recordId: string },
  body: Body,
  text: ShopText,
) {
  const { tx, actor, occurredAt } = context
  const { shopId, siteId, rentalId, renterId, recordId } = fitting
  const picture = imageFromDataUrl(body.signaturePng).bytes
  const [row] = await tx
    .insert(handOvers)
    .values({
      shopId,
      siteId: actor.siteId ?? siteId,
      fittingId: fitting.id,
      recordId,
      rentalId,
      signatureSha256: createHash('sha256').update(picture).digest('hex'),
      signedAs: body.signedAs,
      textId: body.textId,
      textVersion: text.version,
      textSha256: text.sha256,
      soleLengthReadMm: fitting.bootsId ? null : body.soleLengthReadMm,
      personId: actor.personId,
      deviceId: actor.deviceId,
      occurredAt,
    })
    .returning({ id: handOvers.id })
  const handOverId = row!.id
  await tx.insert(signatures).values({ shopId, renterId, handOverId, picture, signedName: body.signedName })
  return handOverId
}

async function noteWhatIsOut({ tx, occurredAt }: Context, fitting: Fitting) {
  const { shopId, rentalId, id: fittingId, ownBootsId } = fitting
  const out = { shopId, rentalId, fittingId, outAt: occurredAt }
  const sided = itemsOf(fitting).flatMap(({ kind: itemKind, id: itemId }) =>
    sides.map((side) => ({ ...out, itemKind, itemId, side })),
  )
  const own = ownBootsId
    ? [{ ...out, itemKind: 'own_boots' as const, itemId: ownBootsId, side: 'both' as const }]
    : []
  await tx.insert(rentalItems).values([...sided, ...own])
}
