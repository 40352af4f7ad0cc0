import type pg from 'pg'

/**
 * Refuses a database that may forget what it confirmed: with fsync or synchronous_commit off, a power cut takes
 * signed records with it. Only databases named test_... under tests may.
 */
export async function requireDurable(pool: pg.Pool, { testing }: { testing: boolean }) {
  const { rows } = await pool.query<{ database: string; fsync: string; commit: string }>(
    `select current_database() as database, current_setting('fsync') as fsync, current_setting('synchronous_commit') as commit`,
  )
  const [{ database, fsync, commit }] = rows as [(typeof rows)[number]]
  if (testing && database.startsWith('test_')) return
  const off = [...(fsync === 'off' ? ['fsync'] : []), ...(commit === 'off' ? ['synchronous_commit'] : [])]
  if (off.length === 0) return
  throw new Error(
    `PostgreSQL runs with ${off.join(' and ')} off, so a power cut could lose signed records. Notchwise does not start on it. Switch ${off.length === 1 ? 'it' : 'them'} on and start again.`,
  )
}
