import { z } from 'zod'
import { day, id, instant, token } from '#shared/schemas/common'
import { renterForm } from '#shared/schemas/renters'
import { command, read } from './define'

/** The day's code at the door. The desk makes the secret; only its hash is kept. */
export const openDoor = command({
  kind: 'doors.open',
  path: '/api/doors/open',
  access: 'renters.write',
  body: z.strictObject({ siteId: id, token }),
  ids: z.object({ doorId: id }),
})

/** A personal link that the desk hands to one renter. */
export const makeFormLink = command({
  kind: 'forms.link',
  path: '/api/forms/link',
  access: 'renters.write',
  body: z.strictObject({ siteId: id, token }),
  ids: z.object({ linkId: id }),
})

/** A phone that opened the door's code begins a form under its own secret. */
export const beginFormBody = z.strictObject({ door: token, token })

export const formView = z.object({
  shop: z.string(),
  site: z.string(),
  today: day,
  ageOfMajority: z.number().int(),
  /** Whether a person of the shop signed the skier-type sentences; until then they are marked. */
  sentencesReviewed: z.boolean(),
  draft: z.record(z.string(), z.unknown()).nullable(),
  draftVersion: z.number().int(),
  submitted: z.object({ number: z.number().int(), at: instant, state: z.string() }).nullable(),
})
export type FormView = z.infer<typeof formView>

export const getForm = read({ path: '/api/forms/mine', access: 'link', answer: formView })

export const draftBody = z.strictObject({
  version: z.int().min(0),
  draft: z.record(z.string().max(40), z.union([z.string().max(500), z.number(), z.boolean(), z.null()])),
})

export const submitForm = command({
  kind: 'forms.submit',
  path: '/api/forms/submit',
  access: 'link',
  body: renterForm,
  ids: z.object({ rentalId: id }),
})
