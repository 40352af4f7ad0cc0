import pg from 'pg'
import { beforeAll, describe, expect, inject, it } from 'vitest'
import { requireDurable } from '../../server/db/durability'
import { startServer } from '../../server/index'
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

  it('is not served by whoever starts the server', async () => {
    const options = {
      databaseUrl: inject('setupUrl').replace('{}', 'postgres'),
      host: '127.0.0.1',
      port: 0,
      sessionSecret: 'tests only',
      secure: false,
      demo: false,
      origins: [],
      clientDir: null,
      logLevel: 'silent',
    }
    await expect(startServer(options)).rejects.toThrow(/does not start on it/)
    const server = await startServer({ ...options, databaseUrl: database.appUrl })
    expect((await fetch(`${server.url}/livez`)).status).toBe(200)
    expect((await fetch(`${server.url}/readyz`)).status).toBe(200)
    await server.close()
  })
})
