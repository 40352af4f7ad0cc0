import type { BoardFitting, BoardItem, BoardRental } from '#shared/schemas/board'
import type { Board } from './board'

/** What a person must do next with somebody or something; the bands of the board, in the order of the way. */
export const bandNames = ['form', 'desk', 'bench', 'handOver', 'clear'] as const
export type BandName = (typeof bandNames)[number]

export type BandEntry =
  | { kind: 'rental'; id: string; rental: BoardRental; since: string }
  | {
      kind: 'fitting'
      id: string
      fitting: BoardFitting
      rental: BoardRental | null
      pair: BoardItem | null
      since: string
    }
  | { kind: 'item'; id: string; item: BoardItem; since: string }

/** People wait from the moment they arrived; things from their last change. */
const longestFirst = (a: BandEntry, b: BandEntry) => (a.since < b.since ? -1 : 1)
const soonestFirst = (a: BandEntry, b: BandEntry) => (promisedOf(a) < promisedOf(b) ? -1 : 1)

function promisedOf(entry: BandEntry): string {
  if (entry.kind === 'fitting') return entry.fitting.promisedAt
  return entry.kind === 'rental' ? entry.rental.promisedAt : entry.since
}

/** The board in bands, for one site or for all (null). */
export function bandsOf(board: Board, siteId: string | null): Record<BandName, BandEntry[]> {
  const here = <Row extends { siteId: string }>(rows: Iterable<Row>) =>
    [...rows].filter((row) => siteId === null || row.siteId === siteId)
  const fittings = here(board.fittings.values())
  const fitted = new Set(fittings.map(({ rentalId }) => rentalId))
  const rentals = here(board.rentals.values())
  const asEntry = (rental: BoardRental): BandEntry => ({
    kind: 'rental',
    id: rental.id,
    rental,
    since: rental.arrivedAt,
  })
  const ticket = (fitting: BoardFitting): BandEntry => ({
    kind: 'fitting',
    id: fitting.id,
    fitting,
    rental: board.rentals.get(fitting.rentalId) ?? null,
    pair: board.items.get(fitting.skiPairId) ?? null,
    since: fitting.preparedAt ?? fitting.claimedAt,
  })
  return {
    form: rentals
      .filter(({ state }) => state === 'waiting')
      .map(asEntry)
      .sort(longestFirst),
    desk: rentals
      .filter(({ id, state }) => state === 'open' && !fitted.has(id))
      .map(asEntry)
      .sort(soonestFirst),
    bench: fittings
      .filter(({ state }) => state === 'claimed')
      .map(ticket)
      .sort(soonestFirst),
    handOver: fittings
      .filter(({ state }) => state === 'prepared')
      .map(ticket)
      .sort(soonestFirst),
    clear: here(board.items.values())
      .filter(({ state }) => state === 'unchecked')
      .map((item): BandEntry => ({ kind: 'item', id: item.id, item, since: item.since }))
      .sort(longestFirst),
  }
}

/** Sets that are out: how many are due back today, and how many should have been back before. Days of the shop. */
export function setsOut(
  board: Board,
  today: string,
  siteId: string | null,
): { out: number; dueToday: number; late: number } {
  const out = [...board.rentals.values()].filter(
    (rental) => rental.state === 'out' && (siteId === null || rental.siteId === siteId),
  )
  return {
    out: out.length,
    dueToday: out.filter(({ endsOn }) => endsOn === today).length,
    late: out.filter(({ endsOn }) => endsOn < today).length,
  }
}

/** Whole minutes from one instant to another; never below nothing. */
export function minutesBetween(from: string, to: Date): number {
  return Math.max(0, Math.floor((to.getTime() - Date.parse(from)) / 60_000))
}
