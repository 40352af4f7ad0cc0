import { lt } from 'drizzle-orm'
import { boardEvents, commandLog } from '../db/schema/schema'
import type { Deps } from '../deps'

const hour = 3_600_000
const keptFor = 7 * 24 * hour

/** Removes command ids and board events that are older than seven days. */
export async function purgeOld(deps: Pick<Deps, 'db' | 'now'>) {
  const limit = new Date(deps.now().getTime() - keptFor)
  await deps.db.delete(commandLog).where(lt(commandLog.recordedAt, limit))
  await deps.db.delete(boardEvents).where(lt(boardEvents.recordedAt, limit))
}

/** What the server does by itself, every hour. */
export function startJobs(deps: Deps): { stop: () => void } {
  const run = () =>
    purgeOld(deps).catch((error: unknown) =>
      deps.log.warn({ err: error }, 'purge did not run; the next hour tries again'),
    )
  const timer = setInterval(run, hour)
  timer.unref()
  return { stop: () => clearInterval(timer) }
}
