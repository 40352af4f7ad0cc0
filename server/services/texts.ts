import { createHash } from 'node:crypto'
import { and, desc, eq, max } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import {
  textKinds,
  textLocales,
  type reviewText,
  type ShopText,
  type TextKind,
  type TextLocale,
  type writeText,
} from '#shared/api/shop'
import { people, shops, shopTexts } from '../db/schema/schema'
import type { Reader, Tx } from '../deps'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { Service } from './commands'
import { productText } from './defaultTexts'
import { noteOfficeChange } from './office'
import { lockShop } from './shops'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

export const textSha256 = (body: string) => createHash('sha256').update(body, 'utf8').digest('hex')

interface Versions {
  current: ShopText
  waiting: ShopText | null
}

/**
 * What renters of the shop are shown: the latest version that a manager signed, or the latest one where none is. Of
 * the skier-type sentences only the wording that the program shows counts.
 */
export async function currentText(
  db: Reader,
  shopId: string,
  kind: TextKind,
  locale: TextLocale,
): Promise<ShopText> {
  return (await versionsOf(db, shopId, kind, locale)).current
}

/** Whether the skier-type sentences, as the program shows them, are signed in every language. */
export async function sentencesReviewed(db: Reader, shopId: string): Promise<boolean> {
  const texts = await Promise.all(textLocales.map((locale) => currentText(db, shopId, 'skier_types', locale)))
  return texts.every(({ reviewed }) => reviewed !== null)
}

/** Refuses what nobody of a real shop signed; the demo shop shows it with its mark. */
export async function requireUsable(db: Reader, shopId: string, text: ShopText): Promise<void> {
  if (text.reviewed) return
  const [shop] = await db.select({ demo: shops.demo }).from(shops).where(eq(shops.id, shopId))
  if (!shop?.demo) throw new Problem('texts.unreviewed', { kind: text.kind, locale: text.locale })
}

export async function textsOf(db: Reader, shopId: string): Promise<Versions[]> {
  const rows: Versions[] = []
  for (const kind of textKinds) {
    for (const locale of textLocales) rows.push(await versionsOf(db, shopId, kind, locale))
  }
  return rows
}

export const writeTextService: Does<typeof writeText> = async (context, body) => {
  const textId = await addVersion(context.tx, context.actor.shopId, body)
  await noteOfficeChange(context, 'texts.write', textId, ['body'])
  return { textId }
}

/** Signs the wording that was read: refused when another stands there meanwhile. */
export const reviewTextService: Does<typeof reviewText> = async (context, { kind, locale, sha256 }) => {
  const { tx, actor, occurredAt } = context
  await lockShop(tx, actor.shopId)
  const { current, waiting } = await versionsOf(tx, actor.shopId, kind, locale)
  const read = waiting ?? current
  if (read.sha256 !== sha256) throw new Problem('texts.changed')
  const textId = read.id ?? (await addVersion(tx, actor.shopId, { kind, locale, body: read.body }))
  if (!read.reviewed) {
    await tx
      .update(shopTexts)
      .set({ reviewedBy: actor.personId, reviewedAt: occurredAt })
      .where(eq(shopTexts.id, textId))
    await noteOfficeChange(context, 'texts.review', textId, ['reviewed'])
  }
  return { textId }
}

async function versionsOf(db: Reader, shopId: string, kind: TextKind, locale: TextLocale): Promise<Versions> {
  const rows = await db
    .select({ text: shopTexts, by: people.name })
    .from(shopTexts)
    .leftJoin(people, eq(people.id, shopTexts.reviewedBy))
    .where(and(eq(shopTexts.shopId, shopId), eq(shopTexts.kind, kind), eq(shopTexts.locale, locale)))
    .orderBy(desc(shopTexts.version))
  const body = productText(kind, locale)
  const own: ShopText = {
    id: null,
    kind,
    locale,
    version: (rows[0]?.text.version ?? 0) + 1,
    body,
    sha256: textSha256(body),
    reviewed: null,
  }
  const texts = rows.map(({ text, by }): ShopText => ({
    id: text.id,
    kind,
    locale,
    version: text.version,
    body: text.body,
    sha256: text.sha256,
    reviewed: text.reviewedAt && by ? { by, at: text.reviewedAt.toISOString() } : null,
  }))
  if (kind === 'skier_types') {
    return { current: texts.find(({ sha256 }) => sha256 === own.sha256) ?? own, waiting: null }
  }
  const latest = texts[0] ?? own
  const signed = texts.find(({ reviewed }) => reviewed)
  return signed && signed !== latest
    ? { current: signed, waiting: latest }
    : { current: latest, waiting: null }
}

/** One version more; two writers at once get two numbers, one after the other. */
async function addVersion(
  tx: Tx,
  shopId: string,
  { kind, locale, body }: { kind: TextKind; locale: TextLocale; body: string },
): Promise<string> {
  await lockShop(tx, shopId)
  const [last] = await tx
    .select({ version: max(shopTexts.version) })
    .from(shopTexts)
    .where(and(eq(shopTexts.shopId, shopId), eq(shopTexts.kind, kind), eq(shopTexts.locale, locale)))
  const [text] = await tx
    .insert(shopTexts)
    .values({ shopId, kind, locale, version: (last?.version ?? 0) + 1, body, sha256: textSha256(body) })
    .returning({ id: shopTexts.id })
  return text!.id
}
