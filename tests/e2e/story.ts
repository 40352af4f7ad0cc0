import { randomBytes } from 'node:crypto'
import { expect, test as base, type Browser, type Page } from '@playwright/test'
import pg from 'pg'
import { clientDir } from '../../server/bin/clientBuild'
import { demoStaff } from '../../server/db/seed/people'
import { startServer, type RunningServer } from '../../server/index'
import { ensureDatabase } from '../../server/postgres/roles'
import { template } from './globalSetup'

export interface Shop {
  url: string
  /** Reads of the database, for what a story must find there. */
  sql: <Row>(text: string, values?: unknown[]) => Promise<Row[]>
  /** Changes that no program may make, as the owner of the schema. */
  asOwner: (text: string, values?: unknown[]) => Promise<void>
  restart: () => Promise<void>
  stop: () => Promise<void>
}

/** The demo shop of one story, on a server and a database of its own. */
export const test = base.extend<{ shop: Shop }>({
  shop: async ({ browserName: _browserName }, use) => {
    const setupUrl = (name: string) => process.env.TEST_SETUP_URL!.replace('{}', name)
    const name = `test_e2e_${randomBytes(5).toString('hex')}`
    const admin = new pg.Client({ connectionString: setupUrl('postgres') })
    await admin.connect()
    await admin.query(`create database ${name} template ${template} strategy file_copy owner notchwise_owner`)
    const { appUrl, ownerUrl } = await ensureDatabase(setupUrl, name)
    const start = (port: number) =>
      startServer({
        ...{
          databaseUrl: appUrl,
          host: '127.0.0.1',
          port,
          sessionSecret: 'only the stories know this secret of theirs',
        },
        ...{ secure: false, demo: true, origins: [], clientDir, logLevel: 'error' },
      })
    let server: RunningServer | null = await start(0)
    const { port, url } = server
    const owner = new pg.Client({ connectionString: ownerUrl })
    await owner.connect()
    const stop = async () => {
      await server?.close()
      server = null
    }
    await use({
      url,
      sql: async <Row>(text: string, values: unknown[] = []) =>
        (await owner.query(text, values)).rows as Row[],
      asOwner: async (text, values = []) => void (await owner.query(text, values)),
      stop,
      restart: async () => {
        await stop()
        server = await start(port)
      },
    })
    await stop()
    await owner.end()
    await admin.query(`drop database if exists ${name} with (force)`)
    await admin.end()
  },
})

/** A browser of its own in which this person of the demo shop is signed in. */
export async function signedIn(
  browser: Browser,
  shop: Shop,
  who: (typeof demoStaff)[number]['key'],
  viewport = { width: 1280, height: 800 },
): Promise<Page> {
  const person = demoStaff.find(({ key }) => key === who)!
  const context = await browser.newContext({ baseURL: shop.url, viewport, locale: 'en-GB' })
  const response = await context.request.post('/api/session', {
    headers: { origin: shop.url, 'x-notchwise': '1' },
    data: { email: `${person.key}@tarnside.example`, password: person.password },
  })
  expect(response.status()).toBe(201)
  return context.newPage()
}

/**
 * Keys as a scanner sends them, to whatever has the focus. They are made in the page, because on a busy machine the
 * browser's remote control is slower than any scanner.
 */
export async function scan(page: Page, label: string) {
  await page.evaluate((text) => {
    const keys = [...text].map((key) => ({ key, code: /[0-9]/.test(key) ? `Digit${key}` : `Key${key}` }))
    for (const key of [...keys, { key: 'Enter', code: 'Enter' }]) {
      const target = document.activeElement ?? document.body
      target.dispatchEvent(new KeyboardEvent('keydown', { ...key, bubbles: true, cancelable: true }))
    }
  }, label)
}

export { expect }
