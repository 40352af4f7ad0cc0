import { afterAll } from 'vitest'
import { startServer, type RunningServer } from '../../server/index'
import { testDatabase, type TestDatabase } from './database'

export interface TestServer {
  database: TestDatabase
  server: RunningServer
  /** Ends this server and starts another on the same port over the same database. */
  restart: () => Promise<void>
}

/** The real server on a free port over a fresh database. */
export async function testServer(): Promise<TestServer> {
  const database = await testDatabase()
  const start = (port: number) =>
    startServer({
      databaseUrl: database.appUrl,
      host: '127.0.0.1',
      port,
      sessionSecret: 'a secret that only tests know, long enough',
      secure: false,
      demo: false,
      origins: [],
      clientDir: null,
      logLevel: 'silent',
    })
  const test: TestServer = {
    database,
    server: await start(0),
    restart: async () => {
      const { port } = test.server
      await test.server.close()
      test.server = await start(port)
    },
  }
  afterAll(() => test.server.close())
  return test
}
