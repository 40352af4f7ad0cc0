import { randomUUID } from 'node:crypto'
import { eq, sql } from 'drizzle-orm'
import type { VoidReason } from '#shared/lifecycle/fittingStates'
import { fittings } from '../db/schema/schema'
import type { Deps, Tx } from '../deps'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import { runCommand, type Service } from './commands'
import { endFitting, lockFitting } from './doubt'

/** What changed, as the database names it, and what the fitting is void for; the first that applies. */
const reasons: [changed: string, reason: VoidReason][] = [
  ['renter_data', 'renter_data_changed'],
  ['boots', 'boots_changed'],
  ['sole', 'sole_changed'],
  ['ski_pair', 'ski_pair_changed'],
  ['binding_model', 'binding_model_changed'],
  ['correction', 'correction_changed'],
  ['record', 'record_error'],
  ['preset', 'preset_changed'],
]

const voidChanged: Service<{ fittingId: string }, { fittingId: string }, PersonActor> = async (
  context,
  { fittingId },
) => {
  const fitting = await lockFitting(context, fittingId)
  if (fitting.state !== 'claimed' && fitting.state !== 'prepared') return { fittingId }
  const changed = await whatChanged(context.tx, fittingId)
  const [, reason] = reasons.find(([what]) => changed.includes(what)) ?? []
  if (reason) await endFitting(context, fitting, { state: 'void', reason })
  return { fittingId }
}

/** The same that the database asks before a record and before a hand-over. */
async function whatChanged(tx: Tx, fittingId: string) {
  const [row] = await tx
    .select({
      changed: sql<string[]>`changed_since(fittings)`,
      preset: sql<boolean>`exists (select 1 from fitting_record_parts p join skis s on s.id = p.ski_id
        where p.record_id = fittings.record_id and s.preset_version <> p.preset_version)`,
      corrected: sql<boolean>`exists (select 1 from fitting_records c where c.corrects_id = fittings.record_id)`,
    })
    .from(fittings)
    .where(eq(fittings.id, fittingId))
  if (!row) return []
  return [...row.changed, ...(row.corrected ? ['record'] : []), ...(row.preset ? ['preset'] : [])]
}

/**
 * Runs what is refused when something changed since the fitting was computed or signed. Then the fitting is made
 * void in a transaction of its own, so that items go back to their places and nobody tries again, and the refusal
 * goes out as it was.
 */
export async function voidingWhatChanged<Answer>(
  deps: Deps,
  actor: PersonActor,
  fittingIdOf: () => string,
  run: () => Promise<Answer>,
): Promise<Answer> {
  try {
    return await run()
  } catch (error) {
    if (error instanceof Problem && error.code === 'handOvers.changed') {
      const envelope = {
        id: randomUUID(),
        occurredAt: deps.now().toISOString(),
        seenSeq: null,
        kind: 'fittings.voidChanged',
        body: { fittingId: fittingIdOf() },
      }
      await runCommand(deps, actor, envelope, voidChanged)
    }
    throw error
  }
}
