import {
  enrol,
  confirmChecks,
  drawSignature,
  fit,
  readSki,
  sign,
  signIn,
  someBoots,
  somePair,
  ticket,
} from './steps'
import { expect, scan, signedIn, test } from './story'

test('a walk-in goes from the form on the phone over bench and hand-over to a cleared return', async ({
  browser,
  shop,
}) => {
  const desk = await signedIn(browser, shop, 'counter')
  await desk.goto('/counter/door')
  await desk.getByRole('button', { name: /code/i }).last().click()
  const address = await desk.locator('a[href*="/door/"]').first().getAttribute('href')

  // The renter, on a phone of their own.
  const phone = await (
    await browser.newContext({ baseURL: shop.url, viewport: { width: 390, height: 844 }, locale: 'en-GB' })
  ).newPage()
  await phone.goto(address!.replace('?kiosk=1', ''))
  await phone.getByLabel('First name').fill('Orla')
  await phone.getByLabel('Last name').fill('Fennimore')
  await phone.getByRole('radio', { name: 'age', exact: true }).check()
  await phone.getByLabel('Age in whole years').fill('40')
  await phone.getByLabel(/Phone/).first().fill('+00 555 0100')
  await phone.getByRole('button', { name: /Next/ }).click()
  await phone.getByRole('textbox', { name: /Body mass/ }).fill('70')
  await phone.getByRole('textbox', { name: /Height/ }).fill('175')
  await expect(phone.getByText(/154 lb/)).toBeVisible()
  await phone.getByRole('radio', { name: /Fast and with force/ }).check()
  await phone.reload()
  await expect(phone.getByRole('textbox', { name: /Body mass/ })).toHaveValue('70')
  await phone.getByRole('button', { name: /Next/ }).click()
  await phone.getByRole('radio', { name: 'from the shop' }).check()
  await phone.getByRole('button', { name: /Next/ }).click()
  await phone.getByRole('button', { name: /Next/ }).click()
  await phone.getByRole('button', { name: 'Send to the desk' }).click()
  await expect(phone.getByText('Sent. You are in the queue.')).toBeVisible()

  // The desk takes them and fits by scanning.
  await desk.goto('/counter')
  await desk.getByText('Orla Fennimore').click()
  await expect(desk).toHaveURL(/counter\/rentals\//)
  const [boots, pair] = [await someBoots(shop, 305), await somePair(shop, 'ladder-16')]
  const fittingId = await fit(desk, shop, boots, pair)

  // The bench: scanning a ski opens its ticket.
  const bench = await signedIn(browser, shop, 'manager')
  const technician = await enrol(bench, shop, 'bench', 'bench')
  await bench.goto('/bench')
  await expect(bench.getByText(/tickets wait/)).toBeVisible()
  await scan(bench, pair.left)
  await expect(bench.getByText('Orla F.').first()).toBeVisible()
  const fitting = await ticket(bench, fittingId)
  // 70 kg, 175 cm, 40 years, type III, sole 305 mm: 8. Source: Italian ski magazine, how bindings are adjusted.
  expect(fitting.value).toBe(8)
  for (const side of ['left', 'right'] as const) {
    await readSki(bench, fitting, side)
    await confirmChecks(bench)
  }
  await sign(bench, technician.pin)

  // Hand-over: all four labels, then the renter reads and signs.
  await desk.goto(`/hand-over/${fittingId}`)
  await expect(desk.getByText(/Scan the left ski/)).toBeVisible()
  for (const label of [pair.left, pair.right, boots.left, boots.right]) await scan(desk, label)
  await desk.getByRole('button', { name: 'Turn the screen to the renter' }).click()
  await expect(desk.getByRole('dialog').getByText('8', { exact: true }).first()).toBeVisible()
  await desk.getByText('I have read the numbers and this text').click()
  await drawSignature(desk)
  await desk.getByRole('button', { name: 'Sign these values' }).click()
  await expect(desk.getByText('Handed over').first()).toBeVisible()
  const [record] = await shop.sql<{ id: string }>('select id from fitting_records where fitting_id = $1', [
    fittingId,
  ])
  await desk.goto(`/records/${record!.id}/print`)
  await expect(desk.getByText(/not approved by this shop/).first()).toBeVisible()
  await expect(desk.getByText(/claims no conformity/).first()).toBeVisible()

  // The return, in any order, and the list before it hangs again.
  await signIn(desk, shop, 'bench')
  await desk.goto('/returns')
  await expect(desk.getByText('Scan what comes back')).toBeVisible()
  for (const label of [boots.right, pair.left, boots.left, pair.right]) await scan(desk, label)
  await expect(desk.getByText('all of it is back').first()).toBeVisible()
  const [back] = await shop.sql<{ id: string; state: string }>(
    'select id, state from ski_pairs where code = $1',
    [pair.code],
  )
  expect(back!.state).toBe('unchecked')
  await desk.goto(`/returns/ski_pair/${back!.id}`)
  const clear = desk.getByRole('button', { name: `Clear ${pair.code}` })
  await expect(clear).toBeVisible()
  for (const sound of await desk.getByRole('button', { name: 'sound', exact: true }).all())
    await sound.click()
  await clear.click()
  await expect
    .poll(
      async () =>
        (await shop.sql<{ state: string }>('select state from ski_pairs where code = $1', [pair.code]))[0]!
          .state,
    )
    .toBe('racked')
})
