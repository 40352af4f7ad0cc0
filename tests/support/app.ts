import { pino } from 'pino'
import supertest from 'supertest'
import type { BoardEvent } from '#shared/schemas/board'
import { createApp, type App } from '../../server/app'
import type { Deps } from '../../server/deps'
import { testDatabase, type TestDatabase } from './database'

/** The page that the tests' requests come from. */
export const testOrigin = 'http://shop.test'

export interface TestApp {
  database: TestDatabase
  deps: Deps
  express: App['express']
  /** What was told to the boards, oldest first. */
  events: { shopId: string; event: BoardEvent }[]
  /** Sets the server's clock, or lets it run again. */
  setNow: (now: Date | null) => void
  /** A browser that nobody signed in at. */
  stranger: () => ReturnType<typeof supertest.agent>
}

/** The real application over a fresh database of its own, without listening. */
export async function testApp(): Promise<TestApp> {
  const database = await testDatabase()
  const events: TestApp['events'] = []
  let fixed: Date | null = null
  const deps: Deps = {
    db: database.db,
    pool: database.pool,
    log: pino({ level: 'silent' }),
    now: () => fixed ?? new Date(),
    sessionSecret: 'tests only',
    secure: false,
    demo: false,
    origins: [testOrigin],
    clientDir: null,
    publish: (shopId, event) => void events.push({ shopId, event }),
    dropSockets: () => undefined,
  }
  const app = createApp(deps)
  return {
    database,
    deps,
    express: app.express,
    events,
    setNow: (now) => void (fixed = now),
    stranger: () =>
      supertest.agent(app.express).set({ origin: testOrigin, 'x-notchwise': '1' }) as ReturnType<
        typeof supertest.agent
      >,
  }
}
