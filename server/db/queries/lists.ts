import { asc, desc, sql, type SQL } from 'drizzle-orm'
import type { PgColumn } from 'drizzle-orm/pg-core'

/** A search text as a pattern for `ilike`, with its own wild cards taken literally. */
export const contains = (text: string) => `%${text.replaceAll(/[\\%_]/g, (c) => `\\${c}`)}%`

/** Codes sort by their number: S99 before S100. */
export const numberOf = (code: PgColumn) => sql<number>`substr(${code}, 2)::int`

export function ordered(by: PgColumn | SQL, descending: boolean): SQL {
  return descending ? desc(by) : asc(by)
}

export const iso = (date: Date) => date.toISOString()
export const isoOrNull = (date: Date | null) => date?.toISOString() ?? null
