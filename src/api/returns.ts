import type { AnswerOf } from '#shared/api/define'
import type { getClearing, listUnchecked } from '#shared/api/inspections'
import type { getReturnsToday, ReturnSet } from '#shared/api/returns'
import type { ItemKind } from '#shared/lifecycle/itemStates'
import { request } from './http'

export type ReturnsToday = AnswerOf<typeof getReturnsToday>
export type Clearing = AnswerOf<typeof getClearing>

/** The day at this device's site, or at all sites where the browser is enrolled nowhere. */
export const fetchReturnsToday = () => request<ReturnsToday>('GET', '/api/returns/today')
export const fetchUnchecked = () => request<AnswerOf<typeof listUnchecked>>('GET', '/api/returns/unchecked')
export const fetchReturnSet = (rentalId: string) => request<ReturnSet>('GET', `/api/returns/sets/${rentalId}`)
export const fetchClearing = (kind: ItemKind, itemId: string) =>
  request<Clearing>('GET', `/api/returns/items/${kind}/${itemId}`)
