import { drizzle } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import * as schema from './schema/schema'

/** Less than a screen waits for its answer: it is told that the database is away, and nothing piles up. */
const connectWithinMs = 10_000

/** Opens a pool and Drizzle over it. A lost connection is an error of the query that used it, never of the process. */
export function openDb(url: string, { max = 10 }: { max?: number } = {}) {
  const pool = new pg.Pool({ connectionString: url, max, connectionTimeoutMillis: connectWithinMs })
  pool.on('error', () => undefined)
  pool.on('connect', (client) => client.on('error', () => undefined))
  const db = drizzle({ client: pool, schema, casing: 'snake_case' })
  return { pool, db, close: () => pool.end() }
}
export type Db = ReturnType<typeof openDb>['db']
