import type { BoardEvent, BoardFitting, BoardItem, BoardRental, BoardSnapshot } from '#shared/schemas/board'

/** The shop's live state as a value. `seq` is the last event in it. */
export interface Board {
  seq: number
  asOf: string
  items: ReadonlyMap<string, BoardItem>
  fittings: ReadonlyMap<string, BoardFitting>
  rentals: ReadonlyMap<string, BoardRental>
  callBacks: number
}

const byId = <Row extends { id: string }>(rows: Row[]) => new Map(rows.map((row) => [row.id, row]))

export function boardFrom(snapshot: BoardSnapshot): Board {
  return {
    seq: snapshot.seq,
    asOf: snapshot.asOf,
    items: byId(snapshot.items),
    fittings: byId(snapshot.fittings),
    rentals: byId(snapshot.rentals),
    callBacks: snapshot.callBacks,
  }
}

function merged<Row extends { id: string }>(
  into: ReadonlyMap<string, Row>,
  rows: Row[],
  stays: (row: Row) => boolean,
): ReadonlyMap<string, Row> {
  if (rows.length === 0) return into
  const next = new Map(into)
  for (const row of rows) {
    if (stays(row)) next.set(row.id, row)
    else next.delete(row.id)
  }
  return next
}

export const onBoard = {
  item: (item: BoardItem) => item.state !== 'retired' && item.state !== 'sold',
  fitting: (fitting: BoardFitting) => fitting.state === 'claimed' || fitting.state === 'prepared',
  rental: (rental: BoardRental) =>
    rental.state === 'waiting' || rental.state === 'open' || rental.state === 'out',
}

/**
 * The board after an event. An event that is already in it changes nothing; one that leaves a gap is not applied:
 * `gap` says so and the caller asks the server for what is missing.
 */
export function applyEvent(board: Board, event: BoardEvent): { board: Board; gap: boolean } {
  if (event.seq <= board.seq) return { board, gap: false }
  if (event.seq > board.seq + 1) return { board, gap: true }
  return {
    gap: false,
    board: {
      seq: event.seq,
      asOf: event.at,
      items: merged(board.items, event.items, onBoard.item),
      fittings: merged(board.fittings, event.fittings, onBoard.fitting),
      rentals: merged(board.rentals, event.rentals, onBoard.rental),
      callBacks: event.callBacks ?? board.callBacks,
    },
  }
}
