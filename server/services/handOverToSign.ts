import { eq } from 'drizzle-orm'
import type { AnswerOf } from '#shared/api/define'
import type { getHandOver } from '#shared/api/handOvers'
import { textLocales, type ShopText, type TextLocale } from '#shared/api/shop'
import { fittingDetail } from '../db/queries/fittingDetail'
import { guardianSigns } from '../db/queries/handOvers'
import { shopTexts } from '../db/schema/schema'
import type { Reader } from '../deps'
import { shopById } from './shops'
import { currentText } from './texts'

const isTextLocale = (locale: string | undefined): locale is TextLocale =>
  (textLocales as readonly (string | undefined)[]).includes(locale)

/** What the renter reads and signs: in the language asked for, else in theirs, else in the shop's. */
export async function handOverToSign(
  db: Reader,
  shopId: string,
  fittingId: string,
  asked: string | undefined,
): Promise<AnswerOf<typeof getHandOver>> {
  const fitting = await fittingDetail(db, shopId, fittingId)
  const shop = await shopById(db, shopId)
  const locale = [asked, fitting.renter.locale, shop.locale].find(isTextLocale) ?? 'en'
  const { id, version, body, reviewed } = await currentText(db, shopId, 'acknowledgement', locale)
  return {
    fitting,
    text: id === null ? null : { id, locale, version, body, reviewed: reviewed !== null },
    guardianSigns: await guardianSigns(db, fittingId),
  }
}

/** The acknowledgement with this id, as long as it is the one that renters are shown in its language. */
export async function acknowledgementInForce(
  db: Reader,
  shopId: string,
  textId: string,
): Promise<ShopText | null> {
  const [shown] = await db.select().from(shopTexts).where(eq(shopTexts.id, textId))
  if (shown?.shopId !== shopId || shown.kind !== 'acknowledgement' || !isTextLocale(shown.locale)) return null
  const now = await currentText(db, shopId, 'acknowledgement', shown.locale)
  return now.id === textId ? now : null
}
