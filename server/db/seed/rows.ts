import { getTableColumns, getTableName, sql } from 'drizzle-orm'
import type { PgTable } from 'drizzle-orm/pg-core'
import type { Tx } from '../../deps'

const snake = (name: string) => name.replace(/[A-Z]/g, (letter) => `_${letter.toLowerCase()}`)

/** Rows on their way into the demo database, table by table; one statement each, for speed. */
export class Rows {
  private readonly byTable = new Map<PgTable, Record<string, unknown>[]>()

  add<T extends PgTable>(table: T, row: T['$inferInsert']) {
    const rows = this.byTable.get(table) ?? []
    rows.push(row)
    this.byTable.set(table, rows)
  }

  /** Completes a row that was added before. */
  patch<T extends PgTable>(table: T, id: string, values: Partial<T['$inferInsert']>) {
    const row = this.byTable.get(table)?.findLast((each) => each.id === id)
    if (!row) throw new Error(`no row ${id} in ${getTableName(table)}`)
    Object.assign(row, values)
  }

  /** Writes the rows of these tables, in this order, and forgets them. */
  async write(tx: Tx, tables: readonly PgTable[]) {
    for (const table of tables) {
      const rows = this.byTable.get(table) ?? []
      for (let at = 0; at < rows.length; at += 2000) await writeChunk(tx, table, rows.slice(at, at + 2000))
      this.byTable.delete(table)
    }
  }
}

async function writeChunk(tx: Tx, table: PgTable, rows: Record<string, unknown>[]) {
  const keys = [...new Set(rows.flatMap((row) => Object.keys(row)))]
  const known = getTableColumns(table)
  const columns = sql.join(
    keys.filter((key) => key in known).map((key) => sql.identifier(snake(key))),
    sql`, `,
  )
  const name = sql.identifier(getTableName(table))
  await tx.execute(sql`
    insert into ${name} (${columns})
    select ${columns} from jsonb_populate_recordset(null::${name}, ${JSON.stringify(rows.map(asJson))}::jsonb)`)
}

/** Instants as ISO text, bytes as PostgreSQL writes them, the rest as it is. */
function asJson(row: Record<string, unknown>) {
  return Object.fromEntries(
    Object.entries(row).map(([key, value]) => [
      snake(key),
      Buffer.isBuffer(value) ? `\\x${value.toString('hex')}` : value,
    ]),
  )
}
