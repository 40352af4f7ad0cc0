import { createHash } from 'node:crypto'
import { and, eq, sql } from 'drizzle-orm'
import type { CommandAnswer, Envelope } from '#shared/api/define'
import type { ProblemCode, ProblemParams } from '#shared/errors'
import type { ItemKind } from '#shared/lifecycle/itemStates'
import type { BoardEvent } from '#shared/schemas/board'
import { boardRows } from '../db/queries/board'
import { boardEvents, commandLog, shopSequences } from '../db/schema/schema'
import type { Deps, Tx } from '../deps'
import { databaseError, Problem } from '../errors'
import { deviceIdOf, personIdOf, type Actor } from './actor'

/** What a service works with inside a command: one transaction, who acts, when, and what the boards must hear of. */
export interface CommandContext<A extends Actor = Actor> {
  deps: Deps
  tx: Tx
  actor: A
  commandId: string
  occurredAt: Date
  touchItem: (kind: ItemKind, id: string) => void
  touchFitting: (id: string) => void
  touchRental: (id: string) => void
  touchCallBacks: () => void
}

export type Service<Body, Ids, A extends Actor = Actor> = (
  context: CommandContext<A>,
  body: Body,
) => Promise<Ids>

interface Touched {
  items: Map<string, ItemKind>
  fittings: Set<string>
  rentals: Set<string>
  callBacks: boolean
}

/**
 * Runs a command once: in one transaction the service's work, the shop's next sequence number, the event and the
 * log row; after commit the boards are told. A service may run again after a deadlock, so it changes nothing outside
 * of its transaction. The same id with the same body answers what it answered the first
 * time; with another body it is refused. Refusals of the domain (409, 422) are final and kept, others are not.
 */
export async function runCommand<Body, Ids, A extends Actor>(
  deps: Deps,
  actor: A,
  envelope: Envelope<Body>,
  service: Service<Body, Ids, A>,
): Promise<CommandAnswer<Ids>> {
  const bodySha256 = createHash('sha256')
    .update(JSON.stringify([envelope.kind, envelope.body]))
    .digest('hex')
  const before = await replay<Ids>(deps, actor.shopId, envelope, bodySha256)
  if (before) return before
  try {
    const answer = await unlessInACircle(() =>
      deps.db.transaction((tx) => once(deps, tx, actor, envelope, bodySha256, service)),
    )
    if (answer.event) deps.publish(actor.shopId, answer.event)
    return answer
  } catch (error) {
    // Two of the same at once: the loser waited for the winner's log row and now reads its answer.
    const lost = databaseError(error)
    if (lost?.code === '23505' && lost.constraint === 'command_log_shop_id_command_id_pk') {
      const winner = await replay<Ids>(deps, actor.shopId, envelope, bodySha256)
      if (winner) return winner
    }
    const refusal = asRefusal(error)
    if (refusal && (refusal.status === 409 || refusal.status === 422)) {
      await keepRefusal(deps, actor, envelope, bodySha256, refusal)
    }
    throw refusal ?? error
  }
}

const triesInACircle = 3

/**
 * Two commands that wait for each other's rows: PostgreSQL ends one of them, whose work is then undone and done anew.
 * The one that goes on has its locks by then, so a second circle of the same two cannot be.
 */
async function unlessInACircle<Answer>(run: () => Promise<Answer>): Promise<Answer> {
  for (let tries = 1; ; tries += 1) {
    try {
      return await run()
    } catch (error) {
      const { code } = databaseError(error) ?? {}
      if ((code !== '40P01' && code !== '40001') || tries === triesInACircle) throw error
    }
  }
}

async function once<Body, Ids, A extends Actor>(
  deps: Deps,
  tx: Tx,
  actor: A,
  envelope: Envelope<Body>,
  bodySha256: string,
  service: Service<Body, Ids, A>,
): Promise<CommandAnswer<Ids>> {
  const touched: Touched = { items: new Map(), fittings: new Set(), rentals: new Set(), callBacks: false }
  const occurredAt = notLaterThan(new Date(envelope.occurredAt), deps.now())
  await tx.insert(commandLog).values({
    shopId: actor.shopId,
    commandId: envelope.id,
    kind: envelope.kind,
    bodySha256,
    status: 200,
    result: {},
    personId: personIdOf(actor),
    deviceId: deviceIdOf(actor),
  })
  const ids = await service(
    {
      deps,
      tx,
      actor,
      commandId: envelope.id,
      occurredAt,
      touchItem: (kind, id) => touched.items.set(id, kind),
      touchFitting: (id) => touched.fittings.add(id),
      touchRental: (id) => touched.rentals.add(id),
      touchCallBacks: () => (touched.callBacks = true),
    },
    envelope.body,
  )
  const event = await nextEvent(deps, tx, actor.shopId, envelope.kind, touched)
  await tx
    .update(commandLog)
    .set({ result: { ids }, seq: event?.seq ?? null })
    .where(and(eq(commandLog.shopId, actor.shopId), eq(commandLog.commandId, envelope.id)))
  return { seq: event?.seq ?? null, event, ids }
}

/** The event of what was touched, under the shop's next number; the number is taken last, after every row lock. */
async function nextEvent(
  deps: Deps,
  tx: Tx,
  shopId: string,
  kind: string,
  touched: Touched,
): Promise<BoardEvent | null> {
  if (!touched.items.size && !touched.fittings.size && !touched.rentals.size && !touched.callBacks)
    return null
  const [row] = await tx
    .update(shopSequences)
    .set({ seq: sql`${shopSequences.seq} + 1` })
    .where(eq(shopSequences.shopId, shopId))
    .returning({ seq: shopSequences.seq })
  if (!row) throw new Error('this shop has no sequence')
  const rows = await boardRows(tx, shopId, {
    skiPairIds: [...touched.items].filter(([, k]) => k === 'ski_pair').map(([id]) => id),
    bootsIds: [...touched.items].filter(([, k]) => k === 'boots').map(([id]) => id),
    fittingIds: [...touched.fittings],
    rentalIds: [...touched.rentals],
    callBacks: touched.callBacks,
  })
  const event: BoardEvent = { seq: row.seq, kind, at: deps.now().toISOString(), ...rows }
  await tx.insert(boardEvents).values({ shopId, seq: row.seq, kind, event })
  return event
}

async function replay<Ids>(
  deps: Deps,
  shopId: string,
  envelope: Envelope,
  bodySha256: string,
): Promise<CommandAnswer<Ids> | null> {
  const [kept] = await deps.db
    .select()
    .from(commandLog)
    .where(and(eq(commandLog.shopId, shopId), eq(commandLog.commandId, envelope.id)))
  if (!kept) return null
  if (kept.bodySha256 !== bodySha256) throw new Problem('command.reused')
  if (kept.status !== 200) {
    const { code, params } = kept.result as { code: ProblemCode; params: ProblemParams }
    throw new Problem(code, params)
  }
  const { ids } = kept.result as { ids: Ids }
  if (kept.seq === null) return { seq: null, event: null, ids }
  const [event] = await deps.db
    .select({ event: boardEvents.event })
    .from(boardEvents)
    .where(and(eq(boardEvents.shopId, shopId), eq(boardEvents.seq, kept.seq)))
  return { seq: kept.seq, event: (event?.event as BoardEvent | undefined) ?? null, ids }
}

async function keepRefusal(
  deps: Deps,
  actor: Actor,
  envelope: Envelope,
  bodySha256: string,
  refusal: Problem,
) {
  await deps.db
    .insert(commandLog)
    .values({
      shopId: actor.shopId,
      commandId: envelope.id,
      kind: envelope.kind,
      bodySha256,
      status: refusal.status,
      result: { code: refusal.code, params: refusal.params },
      personId: personIdOf(actor),
      deviceId: deviceIdOf(actor),
    })
    .onConflictDoNothing()
}

/** A refusal that the database itself made, in our own words. */
function asRefusal(error: unknown): Problem | null {
  if (error instanceof Problem) return error
  const found = databaseError(error)
  if (!found) return null
  if (found.code === 'NW001') return new Problem('items.state', { state: found.detail ?? '' })
  if (found.code === 'NW002') return new Problem('items.held', {})
  if (found.code === 'NW003')
    return new Problem('handOvers.changed', { changed: (found.detail ?? '').split(',') })
  if (found.code === 'NW004') return new Problem('models.not_approved', {})
  if (found.code === 'NW005') return new Problem('fittings.not_open', { state: found.detail ?? '' })
  if (found.code === 'NW006') return new Problem('items.changed', {})
  if (found.code === '23505' && found.constraint?.startsWith('fittings_open_'))
    return new Problem('items.taken', {})
  return null
}

/** A device's clock may run ahead; a fact is never dated after the server's own time. */
function notLaterThan(typed: Date, limit: Date): Date {
  return typed > limit ? limit : typed
}
