import { bigint, customType, integer, text, timestamp, uuid } from 'drizzle-orm/pg-core'

/** Columns that many tables share, so that one thing is stored one way. */
export const id = () => uuid().primaryKey().defaultRandom()
export const instant = () => timestamp({ withTimezone: true, mode: 'date' })
export const now = () => instant().notNull().defaultNow()
export const millimetres = () => integer()
export const sequence = () => bigint({ mode: 'number' })
export const code = () => text()

export const bytes = customType<{ data: Buffer; driverData: Buffer }>({ dataType: () => 'bytea' })
