import type { AnswerOf } from '#shared/api/define'
import type { getBindingModel } from '#shared/api/models'
import type { getFittingWhy } from '#shared/api/fittings'
import type { getHandOver, getReadySets, ReadySet } from '#shared/api/handOvers'
import type { getRecord } from '#shared/api/records'
import type { getBenchQueue, getTicket, QueuedTicket } from '#shared/api/tickets'
import { request } from './http'

export type Ticket = AnswerOf<typeof getTicket>
export type FittingOnTicket = Ticket['fitting']
export type FittingWhy = AnswerOf<typeof getFittingWhy>
export type HandOverToSign = AnswerOf<typeof getHandOver>
export type PrintedRecord = AnswerOf<typeof getRecord>

export async function fetchBenchQueue(): Promise<QueuedTicket[]> {
  return (await request<AnswerOf<typeof getBenchQueue>>('GET', '/api/bench/queue')).tickets
}

export const fetchTicket = (fittingId: string): Promise<Ticket> => request('GET', `/api/tickets/${fittingId}`)

export const fetchFittingWhy = (fittingId: string): Promise<FittingWhy> =>
  request('GET', `/api/fittings/${fittingId}/why`)

export async function fetchReadySets(): Promise<ReadySet[]> {
  return (await request<AnswerOf<typeof getReadySets>>('GET', '/api/hand-overs/ready')).sets
}

export const fetchHandOver = (fittingId: string, locale: string): Promise<HandOverToSign> =>
  request('GET', `/api/hand-overs/${fittingId}`, { query: { locale } })

export const fetchRecord = (recordId: string): Promise<PrintedRecord> =>
  request('GET', `/api/records/${recordId}`)

/** Where the picture of a binding's forward-pressure window lies. */
export const windowPictureUrl = (bindingModelId: AnswerOf<typeof getBindingModel>['id']) =>
  `/api/binding-models/${bindingModelId}/window-picture`
