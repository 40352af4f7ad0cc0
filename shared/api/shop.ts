import { z } from 'zod'
import { isZone } from '#shared/dates/zones'
import { id, instant, note, requiredLine } from '#shared/schemas/common'
import { command, read } from './define'

export const zone = requiredLine(60).refine(isZone)

/** What a shop decides for itself. Limits keep a slip of the keyboard out; they are invented. */
export const shopSettings = z.strictObject({
  name: requiredLine(80),
  /** In which the shop's days begin and end. */
  zone,
  /** Under this age a guardian signs. */
  ageOfMajority: z.int().min(14).max(25),
  /** Promised time of a walk-in: arrival plus this. */
  promiseMinutes: z.int().min(1).max(240),
  /** "Measure this" within these distances of a row border. */
  nearMassKg: z.int().min(0).max(10),
  nearHeightCm: z.int().min(0).max(15),
  /** After this an unfinished claim is shown as ageing. */
  claimAgesMinutes: z.int().min(1).max(600),
})
export type ShopSettings = z.infer<typeof shopSettings>

export const getShop = read({
  path: '/api/shop',
  access: 'shop.manage',
  answer: z.object({
    settings: shopSettings,
    demo: z.boolean(),
    sites: z.array(z.object({ id, name: z.string() })),
  }),
})

export const changeShop = command({
  kind: 'shop.change',
  path: '/api/shop/change',
  access: 'shop.manage',
  body: shopSettings,
  ids: z.object({ shopId: id }),
})

export const createSite = command({
  kind: 'sites.create',
  path: '/api/sites/create',
  access: 'shop.manage',
  body: z.strictObject({ name: requiredLine(80) }),
  ids: z.object({ siteId: id }),
})

export const renameSite = command({
  kind: 'sites.rename',
  path: '/api/sites/rename',
  access: 'shop.manage',
  body: z.strictObject({ siteId: id, name: requiredLine(80) }),
  ids: z.object({ siteId: id }),
})

export const textKinds = ['acknowledgement', 'skier_types'] as const
export type TextKind = (typeof textKinds)[number]
export const textLocales = ['en', 'de'] as const
export type TextLocale = (typeof textLocales)[number]

export const shopText = z.object({
  id: id.nullable(),
  kind: z.enum(textKinds),
  locale: z.enum(textLocales),
  version: z.int(),
  body: z.string(),
  sha256: z.string(),
  reviewed: z.object({ by: z.string(), at: instant }).nullable(),
})
export type ShopText = z.infer<typeof shopText>

/** Of each kind and language: what renters are shown now, and a newer version that nobody signed yet. */
export const listTexts = read({
  path: '/api/texts',
  access: 'shop.manage',
  answer: z.object({ rows: z.array(z.object({ current: shopText, waiting: shopText.nullable() })) }),
})

/** The shop's own wording, as a new version. It is shown to renters once it is signed. */
export const writeText = command({
  kind: 'texts.write',
  path: '/api/texts/write',
  access: 'shop.manage',
  body: z.strictObject({
    kind: z.literal('acknowledgement'),
    locale: z.enum(textLocales),
    body: note(4000).min(20),
  }),
  ids: z.object({ textId: id }),
})

/** A manager read this very wording and signs it for the shop. */
export const reviewText = command({
  kind: 'texts.review',
  path: '/api/texts/review',
  access: 'shop.manage',
  body: z.strictObject({
    kind: z.enum(textKinds),
    locale: z.enum(textLocales),
    sha256: z.string().regex(/^[0-9a-f]{64}$/),
  }),
  ids: z.object({ textId: id }),
})
