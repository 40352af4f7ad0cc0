import type { AnswerOf } from '#shared/api/define'
import type { listRentals, RentalDetail, RentalFormFacts } from '#shared/api/rentals'
import { request, type Query } from './http'

export type RentalList = AnswerOf<typeof listRentals>

export const fetchRentals = (query: Query) => request<RentalList>('GET', '/api/rentals', { query })
export const fetchRental = (id: string) => request<RentalDetail>('GET', `/api/rentals/${id}`)
export const fetchRentalFormFacts = () => request<RentalFormFacts>('GET', '/api/rental-form')
