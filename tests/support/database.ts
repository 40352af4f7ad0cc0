import { randomBytes } from 'node:crypto'
import pg from 'pg'
import { afterAll, inject } from 'vitest'
import { openDb } from '../../server/db/client'
import { ensureDatabase, type Database } from '../../server/postgres/roles'

export interface TestDatabase extends Database {
  db: ReturnType<typeof openDb>['db']
  pool: pg.Pool
}

/** A fresh, migrated database for one test file; it goes away when the file is done. */
export async function testDatabase(): Promise<TestDatabase> {
  const copy = await copyDatabase(inject('setupUrl'), inject('templateDatabase'))
  const { db, pool, close } = openDb(copy.appUrl)
  afterAll(async () => {
    await close()
    await copy.drop()
  })
  return { ownerUrl: copy.ownerUrl, appUrl: copy.appUrl, db, pool }
}

export interface DatabaseCopy extends Database {
  drop: () => Promise<void>
}

/** A copy of a template database; in `setupUrl`, `{}` stands for a database's name. */
export async function copyDatabase(setupUrl: string, template: string): Promise<DatabaseCopy> {
  const urlOf = (database: string) => setupUrl.replace('{}', database)
  const name = `test_${randomBytes(6).toString('hex')}`
  await asSetup(
    urlOf,
    `create database ${name} template ${pg.escapeIdentifier(template)} strategy file_copy owner notchwise_owner`,
  )
  return {
    ...(await ensureDatabase(urlOf, name)),
    drop: () => dropDatabase(urlOf, name),
  }
}

export const dropDatabase = (urlOf: (database: string) => string, name: string) =>
  asSetup(urlOf, `drop database if exists ${pg.escapeIdentifier(name)} with (force)`)

async function asSetup(urlOf: (database: string) => string, statement: string) {
  const client = new pg.Client({ connectionString: urlOf('postgres') })
  await client.connect()
  try {
    await client.query(statement)
  } finally {
    await client.end()
  }
}
