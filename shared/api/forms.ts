import { z } from 'zod'
import { rentalStates } from '#shared/lifecycle/fittingStates'
import { day, id, instant, token } from '#shared/schemas/common'
import { draftFields, renterForm } from '#shared/schemas/renters'
import { command, read } from './define'

/** The day's code at a site's door, until the shop's day ends. The desk makes the secret; only its hash is kept. */
export const openDoor = command({
  kind: 'doors.open',
  path: '/api/doors/open',
  access: 'renters.write',
  body: z.strictObject({ siteId: id, token }),
  ids: z.object({ doorId: id }),
})

/** Ends every code at a site's door, when one got out. */
export const closeDoor = command({
  kind: 'doors.close',
  path: '/api/doors/close',
  access: 'renters.write',
  body: z.strictObject({ siteId: id }),
  ids: z.object({}),
})

/** A personal link that the desk hands to one renter: for their rental, or for a form not begun yet. */
export const makeFormLink = command({
  kind: 'forms.link',
  path: '/api/forms/link',
  access: 'renters.write',
  body: z.strictObject({ siteId: id, token, rentalId: id.nullable() }),
  ids: z.object({ linkId: id }),
})

/** Ends every personal link of a rental. */
export const endFormLinks = command({
  kind: 'forms.unlink',
  path: '/api/forms/unlink',
  access: 'renters.write',
  body: z.strictObject({ rentalId: id }),
  ids: z.object({}),
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
  /** What was typed so far on this link; null before, and again once it was sent. */
  draft: draftFields.nullable(),
  draftVersion: z.number().int(),
  /** Name and period of the rental that the desk made this link for, until the form is sent. */
  known: z.object({ firstName: z.string(), lastName: z.string(), startsOn: day, endsOn: day }).nullable(),
  submitted: z
    .object({ number: z.number().int(), at: instant, promisedAt: instant, state: z.enum(rentalStates) })
    .nullable(),
})
export type FormView = z.infer<typeof formView>

export const getForm = read({ path: '/api/forms/mine', access: 'link', answer: formView })

/** Keeps what was typed. `version` is the one that the page last saw. */
export const draftBody = z.strictObject({ version: z.int().min(0), draft: draftFields })
export const draftAnswer = z.object({ draftVersion: z.number().int() })

export const submitForm = command({
  kind: 'forms.submit',
  path: '/api/forms/submit',
  access: 'link',
  body: renterForm,
  ids: z.object({ rentalId: id }),
})
