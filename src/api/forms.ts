import type { FormView, submitForm } from '#shared/api/forms'
import type { RenterForm } from '#shared/schemas/renters'
import { sendCommand } from './commands'
import { request } from './http'

/** Only the names travel to the phone, not the schemas. */
const submit = { kind: 'forms.submit', path: '/api/forms/submit' } satisfies Pick<
  typeof submitForm,
  'kind' | 'path'
>
const byLink = (link: string) => ({ headers: { 'x-renter-link': link } })

/** Begins a form of one's own at the door's code. Asking again with the same link begins no second one. */
export const beginForm = (door: string, link: string) =>
  request<null>('POST', '/api/forms/begin', { body: { door, token: link } })

export const fetchForm = (link: string) => request<FormView>('GET', '/api/forms/mine', byLink(link))

export const saveDraft = (link: string, version: number, draft: Record<string, string>) =>
  request<{ draftVersion: number }>('PUT', '/api/forms/mine', { ...byLink(link), body: { version, draft } })

export const sendForm = (link: string, form: RenterForm) =>
  sendCommand<RenterForm, { rentalId: string }>(submit, form, { link })
