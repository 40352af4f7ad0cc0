import { and, asc, eq, gt } from 'drizzle-orm'
import type { BoardCatchUp, BoardEvent } from '#shared/schemas/board'
import { boardSnapshot, headSequence } from '../db/queries/board'
import { boardEvents } from '../db/schema/schema'
import type { Deps } from '../deps'

/** More missed events than this are answered by a snapshot: it is smaller. */
const mostEvents = 500

/** What a screen that has applied `seq` missed. */
export async function boardSince(deps: Deps, shopId: string, seq: number): Promise<BoardCatchUp> {
  const head = await headSequence(deps.db, shopId)
  if (seq <= head && head - seq <= mostEvents) {
    const rows = await deps.db
      .select({ event: boardEvents.event })
      .from(boardEvents)
      .where(and(eq(boardEvents.shopId, shopId), gt(boardEvents.seq, seq)))
      .orderBy(asc(boardEvents.seq))
    const events = rows.map((row) => row.event as BoardEvent)
    // Events are purged after a week: a gap at the start means that this screen slept longer.
    if (seq === head || events[0]?.seq === seq + 1)
      return { kind: 'events', events, head: events.at(-1)?.seq ?? head }
  }
  return { kind: 'snapshot', snapshot: await boardSnapshot(deps.db, shopId, deps.now()) }
}
