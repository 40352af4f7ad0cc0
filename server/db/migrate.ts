import { fileURLToPath } from 'node:url'
import { drizzle } from 'drizzle-orm/node-postgres'
import { migrate } from 'drizzle-orm/node-postgres/migrator'
import pg from 'pg'

const folder = fileURLToPath(new URL('../../drizzle', import.meta.url))

/**
 * Brings a database to the newest schema, as its owner. Starters that meet wait for each other; a lock that a
 * running shop holds ends the migration after ten seconds instead of stopping the shop.
 */
export async function migrateDatabase(ownerUrl: string) {
  const client = new pg.Client({ connectionString: ownerUrl })
  await client.connect()
  try {
    await client.query('select pg_advisory_lock(724001)')
    await client.query("set lock_timeout = '10s'")
    await migrate(drizzle({ client }), { migrationsFolder: folder })
  } finally {
    await client.end()
  }
}
