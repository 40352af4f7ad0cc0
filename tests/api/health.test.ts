import supertest from 'supertest'
import { beforeAll, describe, expect, it } from 'vitest'
import { createApp } from '../../server/app'
import { openDb } from '../../server/db/client'
import { testApp, type TestApp } from '../support/app'
import { freePort } from '../support/start'

let app: TestApp
beforeAll(async () => {
  app = await testApp()
})

describe('what a machine asks this server', () => {
  it('lives and is ready, for whoever asks, and says nothing else', async () => {
    expect((await app.stranger().get('/livez')).body).toEqual({ live: true })
    expect((await app.stranger().get('/readyz')).body).toEqual({ ready: true })
  })

  it('lives and is not ready while the database is away', async () => {
    const nobody = openDb(`postgres://notchwise_app@127.0.0.1:${await freePort()}/test_away`)
    const { express, close } = createApp({ ...app.deps, db: nobody.db, pool: nobody.pool })
    const { status, body, type } = await supertest(express).get('/readyz')
    expect([status, body.code, type]).toEqual([503, 'server.database_away', 'application/problem+json'])
    expect((await supertest(express).get('/livez')).status).toBe(200)
    close()
    await nobody.close()
  })
})
