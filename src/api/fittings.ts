import type { AnswerOf } from '#shared/api/define'
import type { bootsFor, getFittingFacts, suggestPairs } from '#shared/api/fittings'
import type { lookUpLabel } from '#shared/api/items'
import type { StationAnswer } from '#shared/api/session'
import { request } from './http'

export type FittingDeskFacts = AnswerOf<typeof getFittingFacts>
export type PairSuggestions = AnswerOf<typeof suggestPairs>
export type BootSuggestions = AnswerOf<typeof bootsFor>
export type FoundLabel = AnswerOf<typeof lookUpLabel>

/** Boots of the shop by id, the renter's own, or none yet. */
export type ChosenBoots = { id: string } | 'own' | null

/** What a fitting of these parts would be computed from. */
export function fetchFittingFacts(
  rentalId: string,
  chosen: { skiPairId: string | null; boots: ChosenBoots },
): Promise<FittingDeskFacts> {
  return request('GET', '/api/fittings/facts', {
    query: {
      rentalId,
      skiPairId: chosen.skiPairId,
      bootsId: typeof chosen.boots === 'object' ? chosen.boots?.id : null,
      boots: chosen.boots === 'own' ? 'own' : null,
    },
  })
}

/** Free pairs that stand nearest; without boots of the shop the renter's own are meant. */
export function fetchPairSuggestions(rentalId: string, bootsId: string | null): Promise<PairSuggestions> {
  return request('GET', '/api/fittings/suggest', { query: { rentalId, bootsId } })
}

export function fetchBootSuggestions(rentalId: string, mondo?: number): Promise<BootSuggestions> {
  return request('GET', '/api/boots-for', { query: { rentalId, mondo } })
}

export function fetchLabel(label: string): Promise<FoundLabel> {
  return request('GET', '/api/lookup', { query: { label } })
}

/** The desk that this browser is enrolled as, with who may sign at it; null where it is not. */
export function fetchStation(): Promise<StationAnswer> {
  return request('GET', '/api/station')
}
