import { and, isNotNull, lt } from 'drizzle-orm'
import { boardEvents, commandLog, formLinks } from '../db/schema/schema'
import type { Deps } from '../deps'

const hour = 3_600_000
const keptFor = 7 * 24 * hour

/**
 * Removes command ids and board events that are older than seven days, and what somebody typed into a form that was
 * never sent and no longer can be.
 */
export async function purgeOld(deps: Pick<Deps, 'db' | 'now'>) {
  const limit = new Date(deps.now().getTime() - keptFor)
  await deps.db.delete(commandLog).where(lt(commandLog.recordedAt, limit))
  await deps.db.delete(boardEvents).where(lt(boardEvents.recordedAt, limit))
  await deps.db
    .update(formLinks)
    .set({ draft: null })
    .where(and(lt(formLinks.expiresAt, deps.now()), isNotNull(formLinks.draft)))
}

/** What the server does by itself: as it starts, for one that runs by day only, and every hour. */
export function startJobs(deps: Deps): { stop: () => void } {
  const run = () =>
    purgeOld(deps).catch((error: unknown) =>
      deps.log.warn({ err: error }, 'purge did not run; the next hour tries again'),
    )
  void run()
  const timer = setInterval(run, hour)
  timer.unref()
  return { stop: () => clearInterval(timer) }
}
