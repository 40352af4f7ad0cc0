import { sql } from 'drizzle-orm'
import { expect } from 'vitest'
import type { TestDatabase } from './database'

/** Goes on once a command waits for a row that somebody else has locked. */
export async function someoneWaits(db: TestDatabase['db']) {
  await expect
    .poll(
      async () => {
        const { rows } = await db.execute<{ waiting: number }>(
          sql`select count(*)::int waiting from pg_stat_activity where datname = current_database() and wait_event_type = 'Lock'`,
        )
        return rows[0]!.waiting
      },
      { timeout: 10_000 },
    )
    .toBe(1)
}
