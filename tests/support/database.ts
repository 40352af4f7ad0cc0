import { randomBytes } from 'node:crypto'
import pg from 'pg'
import { afterAll, inject } from 'vitest'
import { openDb } from '../../server/db/client'

export interface TestDatabase {
  /** As the role that owns the schema, for what no program may do. */
  ownerUrl: string
  /** As the role that the server runs under. */
  appUrl: string
  db: ReturnType<typeof openDb>['db']
  pool: pg.Pool
  close: () => Promise<void>
}

/** A fresh, migrated database for one test file; it goes away when the file is done. */
export async function testDatabase(): Promise<TestDatabase> {
  const server = inject('databaseServer')
  const name = `test_${randomBytes(6).toString('hex')}`
  const admin = new pg.Client({ connectionString: `${server}/postgres` })
  await admin.connect()
  await admin.query(
    `create database ${name} template ${inject('templateDatabase')} strategy file_copy owner notchwise_owner`,
  )
  const as = (role: string) => `${server.replace('postgres@', `${role}@`)}/${name}`
  const { db, pool, close: closePool } = openDb(as('notchwise_app'))
  const close = async () => {
    await closePool()
    await admin.query(`drop database if exists ${name} with (force)`)
    await admin.end()
  }
  afterAll(close)
  return { ownerUrl: as('notchwise_owner'), appUrl: as('notchwise_app'), db, pool, close }
}
