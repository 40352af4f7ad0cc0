import pg from 'pg'
import { beforeAll, describe, expect, inject, it } from 'vitest'
import { requireDurable } from '../../server/db/durability'
import { testDatabase, type TestDatabase } from '../support/database'

let database: TestDatabase
beforeAll(async () => {
  database = await testDatabase()
})

describe('a database that may forget what it confirmed', () => {
  it('is refused, with what to switch on', async () => {
    await expect(requireDurable(database.pool, { testing: false })).rejects.toThrow(
      /fsync and synchronous_commit off/,
    )
  })

  it('is good enough for tests, in a database named so', async () => {
    await expect(requireDurable(database.pool, { testing: true })).resolves.toBeUndefined()
  })

  it('is refused under tests too when it is named as a shop’s', async () => {
    const pool = new pg.Pool({ connectionString: inject('setupUrl').replace('{}', 'postgres'), max: 1 })
    await expect(requireDurable(pool, { testing: true })).rejects.toThrow(/does not start on it/)
    await pool.end()
  })
})
