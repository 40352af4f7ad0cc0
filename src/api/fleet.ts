import type { getBoots, listBoots } from '#shared/api/boots'
import type { AnswerOf } from '#shared/api/define'
import type { listQuarantine } from '#shared/api/items'
import type { getBindingModel, listBindingModels, listSkiModels } from '#shared/api/models'
import type { getSkiPair, listSkiPairs } from '#shared/api/skiPairs'
import { request, type Query } from './http'

export type SkiPairList = AnswerOf<typeof listSkiPairs>
export type SkiPair = AnswerOf<typeof getSkiPair>
export type BootsList = AnswerOf<typeof listBoots>
export type Boots = AnswerOf<typeof getBoots>
export type SkiModels = AnswerOf<typeof listSkiModels>
export type BindingModels = AnswerOf<typeof listBindingModels>
export type BindingSheet = AnswerOf<typeof getBindingModel>
export type Quarantine = AnswerOf<typeof listQuarantine>

export const fetchSkiPairs = (query: Query) => request<SkiPairList>('GET', '/api/ski-pairs', { query })
export const fetchSkiPair = (id: string) => request<SkiPair>('GET', `/api/ski-pairs/${id}`)
export const fetchBootsList = (query: Query) => request<BootsList>('GET', '/api/boots', { query })
export const fetchBoots = (id: string) => request<Boots>('GET', `/api/boots/${id}`)
export const fetchSkiModels = () => request<SkiModels>('GET', '/api/ski-models')
export const fetchBindingModels = () => request<BindingModels>('GET', '/api/binding-models')
export const fetchBindingModel = (id: string) => request<BindingSheet>('GET', `/api/binding-models/${id}`)
export const fetchQuarantine = () => request<Quarantine>('GET', '/api/quarantine')
/** The address of a sheet's window picture; the version only makes a changed picture be fetched anew. */
export const windowPictureUrl = ({ id, version }: { id: string; version: number }) =>
  `/api/binding-models/${id}/window-picture?version=${version}`
