import { randomBytes } from 'node:crypto'
import pg from 'pg'
import { afterAll, inject } from 'vitest'
import { openDb } from '../../server/db/client'
import { ensureDatabase } from '../../server/postgres/roles'

export interface TestDatabase {
  /** As the role that owns the schema, for what no program may do. */
  ownerUrl: string
  /** As the role that the server runs under. */
  appUrl: string
  db: ReturnType<typeof openDb>['db']
  pool: pg.Pool
}

/** A fresh, migrated database for one test file; it goes away when the file is done. */
export async function testDatabase(): Promise<TestDatabase> {
  const setupUrl = (database: string) => inject('setupUrl').replace('{}', database)
  const name = `test_${randomBytes(6).toString('hex')}`
  const admin = new pg.Client({ connectionString: setupUrl('postgres') })
  await admin.connect()
  await admin.query(
    `create database ${name} template ${inject('templateDatabase')} strategy file_copy owner notchwise_owner`,
  )
  const { ownerUrl, appUrl } = await ensureDatabase(setupUrl, name)
  const { db, pool, close } = openDb(appUrl)
  afterAll(async () => {
    await close()
    await admin.query(`drop database if exists ${name} with (force)`)
    await admin.end()
  })
  return { ownerUrl, appUrl, db, pool }
}
