import { expect, signedIn, test } from './story'

test('a head technician adds a pair, racks it, reads it, retires it by mistake, and holds it', async ({
  browser,
  shop,
}) => {
  const page = await signedIn(browser, shop, 'head')
  const dialog = page.getByRole('dialog')
  await page.goto('/fleet/ski-pairs')
  await page.getByRole('button', { name: 'Add a pair' }).click()
  await dialog.getByLabel('Code').fill('s9001')
  await dialog.getByLabel('Length').fill('163')
  await dialog.getByRole('combobox').nth(0).click()
  await page.getByRole('option', { name: 'Corrie 80' }).click()
  await dialog.getByRole('combobox').nth(1).click()
  await page.getByRole('option', { name: 'ladder-12-s' }).click()
  await dialog.getByRole('button', { name: 'Add the pair' }).click()
  await expect(page.getByRole('heading', { name: 'S9001' })).toBeVisible()

  await page.getByRole('button', { name: 'Rack it' }).click()
  await dialog.getByRole('button', { name: 'Rack it' }).click()
  await expect(dialog.getByText('Type the place where it hangs.')).toBeVisible()
  await dialog.getByLabel('Rack place').fill('F 99')
  await dialog.getByRole('button', { name: 'Rack it' }).click()
  await expect(page.getByText('S9001 is racked')).toBeVisible()

  await page.getByRole('button', { name: 'Read where it stands' }).first().click()
  await dialog.getByLabel('Toe mark').fill('4')
  await dialog.getByLabel('Heel mark').fill('77')
  await dialog.getByRole('button', { name: 'Record what I read' }).click()
  await expect(dialog.getByText('This mark is not on the rail.')).toBeVisible()
  await dialog.getByLabel('Heel mark').fill('5')
  await dialog.getByRole('button', { name: 'Record what I read' }).click()
  await expect(page.getByText('toe 4, heel 5').first()).toBeVisible()

  await page.getByRole('button', { name: 'Retire' }).click()
  await dialog.getByLabel('Reason').fill('The wrong pair')
  await dialog.getByRole('button', { name: 'Retire' }).click()
  await expect(page.getByText('S9001 is retired')).toBeVisible()
  await page.getByRole('button', { name: 'Undo' }).last().click()
  await expect(page.getByRole('button', { name: 'To service' })).toBeVisible()

  await page.getByRole('button', { name: 'Hold in quarantine' }).click()
  await dialog.getByLabel('Reason').fill('Somebody fell on it')
  await dialog.getByRole('button', { name: 'Hold in quarantine' }).click()
  await page.getByRole('link', { name: 'To the holds' }).click()
  await expect(page.getByRole('row', { name: /S9001/ })).toContainText('Somebody fell on it')
  const states = await shop.sql<{ to_state: string }>(
    `select to_state from state_changes c join ski_pairs p on p.id = c.item_id where p.code = 'S9001' order by item_seq`,
  )
  expect(states.map(({ to_state }) => to_state)).toEqual(['racked', 'retired', 'racked', 'quarantine'])
})

test('a list stands in the address: search, filter and order survive a reload', async ({ browser, shop }) => {
  const page = await signedIn(browser, shop, 'counter')
  await page.goto('/fleet/ski-pairs?state=racked')
  await page.getByRole('columnheader', { name: 'cm' }).click()
  await page.getByPlaceholder('code, length, place').fill('B 1')
  await expect(page).toHaveURL(/search=B\+?(%20)?1/)
  await expect(page).toHaveURL(/sort=lengthCm/)
  const codes = () => page.locator('tbody tr td:first-child').allInnerTexts()
  await expect.poll(async () => (await codes()).length).toBeGreaterThan(1)
  await page.waitForLoadState('networkidle')
  const before = await codes()
  await page.reload()
  await expect.poll(codes).toEqual(before)
  await expect(page.getByPlaceholder('code, length, place')).toHaveValue('B 1')
  await expect(page.getByRole('button', { name: 'Add a pair' })).toHaveCount(0)
})

test('a sheet that was changed binds nobody until a head technician signs it again', async ({
  browser,
  shop,
}) => {
  const page = await signedIn(browser, shop, 'manager')
  await page.goto('/fleet/binding-models')
  await page.getByRole('link', { name: 'pebble-20' }).click()
  await page.getByRole('link', { name: 'Change' }).click()
  await page.getByLabel('Page').fill('31')
  await page.getByRole('button', { name: 'Save the sheet' }).click()
  await expect(page.getByText('This sheet is not signed')).toBeVisible()
  await expect(page.getByRole('button', { name: 'Sign the sheet' })).toHaveCount(0)

  const head = await signedIn(browser, shop, 'head')
  await head.goto(page.url())
  await head.getByRole('button', { name: 'Sign the sheet' }).click()
  await expect(head.getByText(/^Signed by/)).toBeVisible()
})

test('two people change one pair: the second is told, though the page behind showed the new state', async ({
  browser,
  shop,
}) => {
  const [pair] = await shop.sql<{ id: string; code: string }>(
    `select id, code from ski_pairs where state = 'racked' order by code limit 1`,
  )
  const pages = [await signedIn(browser, shop, 'head'), await signedIn(browser, shop, 'manager')]
  for (const page of pages) {
    await page.goto(`/fleet/ski-pairs/${pair!.id}`)
    await page.getByRole('button', { name: 'Change', exact: true }).click()
  }
  const [first, second] = pages.map((page) => page.getByRole('dialog'))
  await first!.getByLabel('Rack place').fill('Q 1')
  await first!.getByRole('button', { name: 'Save' }).click()
  await expect(pages[1]!.getByText('Q 1', { exact: true })).toBeVisible()
  await second!.getByLabel('Rack place').fill('Q 2')
  await second!.getByRole('button', { name: 'Save' }).click()
  await expect(second!.getByText('Somebody else changed it meanwhile')).toBeVisible()
  const [kept] = await shop.sql<{ rack_place: string }>('select rack_place from ski_pairs where id = $1', [
    pair!.id,
  ])
  expect(kept!.rack_place).toBe('Q 1')
})
