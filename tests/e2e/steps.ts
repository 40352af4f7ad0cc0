import { expect, type Page } from '@playwright/test'
import type { getFitting } from '#shared/api/fittings'
import type { AnswerOf } from '#shared/api/define'
import { markOf } from '#shared/track/marks'
import { demoStaff } from '../../server/db/seed/people'
import { scan, type Shop } from './story'

/** What people do at the screens of the shop, step by step, as the stories tell it. */

const ownOrigin = (shop: Shop) => ({ origin: shop.url, 'x-notchwise': '1' })

/** Another person signs in on the same browser; a station's enrolment stays. */
export async function signIn(page: Page, shop: Shop, who: string) {
  const person = demoStaff.find(({ key }) => key === who)!
  const response = await page.request.post('/api/session', {
    headers: ownOrigin(shop),
    data: { email: `${person.key}@tarnside.example`, password: person.password },
  })
  expect(response.status()).toBe(201)
  return person
}

/** A manager makes this browser a station, then somebody else goes on there. */
export async function enrol(page: Page, shop: Shop, station: string, who: string) {
  await signIn(page, shop, 'manager')
  const [site] = await shop.sql<{ id: string }>(`select id from sites where name = 'Lower Lift'`)
  const response = await page.request.post('/api/devices', {
    headers: ownOrigin(shop),
    data: { name: `${station} of a story`, station, siteId: site!.id },
  })
  expect(response.ok()).toBe(true)
  return signIn(page, shop, who)
}

export interface Labels {
  code: string
  left: string
  right: string
}

const labelled = `(select text from labels l where l.item_id = i.id and l.side = 'left' and l.until is null) "left",
  (select text from labels l where l.item_id = i.id and l.side = 'right' and l.until is null) "right"`

/** Racked boots of this sole length and type at Lower Lift. */
export async function someBoots(shop: Shop, soleLengthMm: number, soleType = 'ISO 5355 A'): Promise<Labels> {
  const [found] = await shop.sql<Labels>(
    `select code, ${labelled} from boots i join sites s on s.id = i.site_id
     where state = 'racked' and s.name = 'Lower Lift' and sole_length_mm = $1 and sole_type = $2 order by code limit 1`,
    [soleLengthMm, soleType],
  )
  return found!
}

/** A racked pair with this track at Lower Lift. */
export async function somePair(shop: Shop, binding: string, skip = 0): Promise<Labels> {
  const [found] = await shop.sql<Labels>(
    `select i.code, ${labelled} from ski_pairs i join sites s on s.id = i.site_id join binding_models b on b.id = i.binding_model_id
     where i.state = 'racked' and s.name = 'Lower Lift' and b.name = $1 order by i.code offset $2 limit 1`,
    [binding, skip],
  )
  return found!
}

/** Scans until the screen echoes the label: a person scans again, too, when a page that just opened did not hear it. */
export async function scanHeard(page: Page, label: string) {
  await expect(async () => {
    await scan(page, label)
    await expect(page.getByText(label, { exact: true })).toBeVisible({ timeout: 1500 })
  }).toPass({ timeout: 15_000 })
}

/** Fits somebody with boots and a pair by scanning them, up to the ticket. Answers the fitting's id. */
export async function fit(page: Page, shop: Shop, boots: Labels, pair: Labels): Promise<string> {
  await expect(page.getByText('Scan boots or skis')).toBeVisible()
  for (const label of [boots.left, boots.right, pair.left, pair.right]) {
    await scanHeard(page, label)
  }
  await page.getByRole('button', { name: /to the bench/ }).click()
  await expect
    .poll(
      async () =>
        (
          await shop.sql(
            `select from fittings f join ski_pairs p on p.id = f.ski_pair_id where p.code = $1 and f.state = 'claimed'`,
            [pair.code],
          )
        ).length,
    )
    .toBe(1)
  const [fitting] = await shop.sql<{ id: string }>(
    `select f.id from fittings f join ski_pairs p on p.id = f.ski_pair_id where p.code = $1 and f.state = 'claimed'`,
    [pair.code],
  )
  return fitting!.id
}

export type Fitting = AnswerOf<typeof getFitting>

export async function ticket(page: Page, fittingId: string): Promise<Fitting> {
  return (await (await page.request.get(`/api/fittings/${fittingId}`)).json()) as Fitting
}

/** Types one number as a hand does and takes it. */
export async function typeRead(page: Page, value: string) {
  for (const key of value) {
    await page.keyboard.press(key === '.' ? 'Period' : `Digit${key}`)
    await page.waitForTimeout(90)
  }
  await page.keyboard.press('Enter')
}

/** Reads one ski of a track with plain numbers as its marks: marks, values, then what was looked at. */
export async function readSki(
  page: Page,
  fitting: Fitting,
  side: 'left' | 'right',
  read: { heel?: number; heelValue?: number } = {},
) {
  const { track } = fitting.skiPair.binding
  const target = fitting.targets[side]
  const marks = {
    heel: markOf(track, 'heel', read.heel ?? fitting.track.heel)!,
    toe: markOf(track, 'toe', fitting.track.toe)!,
  }
  for (const [asked, typed] of [
    ['At which mark does it stand?', marks.heel],
    ['Which value does the indicator show?', String(read.heelValue ?? target.heel)],
    ['At which mark does it stand?', marks.toe],
    ['Which value does the indicator show?', String(target.toe)],
  ] as const) {
    await expect(page.getByText(asked).first()).toBeVisible()
    await typeRead(page, typed)
  }
}

/** Sole clearance, forward pressure, brake, function: each looked at and confirmed. */
export async function confirmChecks(page: Page) {
  await page.getByRole('button', { name: 'Light drag' }).click()
  await page.getByRole('radio', { name: 'stands in its window' }).click()
  await page.getByRole('button', { name: /It stands in its window|Keep / }).click()
  await page.getByRole('button', { name: 'Folds and springs out' }).last().click()
  await page.getByRole('button', { name: 'Opens and comes back' }).last().click()
}

/** Six digits, and the record is signed. */
export async function sign(page: Page, pin: string) {
  await expect(page.getByRole('button', { name: 'Sign the record' })).toBeVisible()
  for (const digit of pin) {
    await page.keyboard.press(`Digit${digit}`)
    await page.waitForTimeout(90)
  }
  await page.getByRole('button', { name: 'Sign the record' }).click()
  await expect(page.getByText('The set waits for its renter at the hand-over.')).toBeVisible()
}

/** The renter's finger on the screen. */
export async function drawSignature(page: Page) {
  const box = (await page.locator('canvas').boundingBox())!
  await page.mouse.move(box.x + 30, box.y + box.height / 2)
  await page.mouse.down()
  for (let step = 1; step <= 12; step += 1) {
    await page.mouse.move(box.x + 30 + step * 12, box.y + box.height / 2 + (step % 2 ? -12 : 12))
  }
  await page.mouse.up()
}
