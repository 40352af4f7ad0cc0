import { expect, signedIn, test } from './story'

test('an error found on a record calls back who is out on it', async ({ browser, shop }) => {
  const [out] = await shop.sql<{ record_id: string; number: number; code: string }>(
    `select f.record_id, f.number, p.code from fittings f join ski_pairs p on p.id = f.ski_pair_id
     where f.state = 'handed_over' and p.state = 'out' and not exists (select from call_backs c where c.fitting_id = f.id)
     order by f.number desc limit 1`,
  )
  const head = await signedIn(browser, shop, 'head')
  await head.goto(`/records/${out!.record_id}/print`)
  await head.getByRole('button', { name: 'An error was found on this record' }).click()
  await head.getByLabel('What is wrong').fill('The left heel value was read at the other pair')
  await head.getByRole('button', { name: 'Correct the record' }).click()
  await expect(head.getByText('The left heel value was read at the other pair').first()).toBeVisible()
  const [made] = await shop.sql<{ corrects: string; open: number }>(
    `select r.corrects_id as corrects, (select count(*)::int from call_backs c where c.fitting_id = r.fitting_id and c.closed_at is null) as open
     from fitting_records r where r.corrects_id = $1`,
    [out!.record_id],
  )
  expect(made).toEqual({ corrects: out!.record_id, open: 1 })

  const counter = await signedIn(browser, shop, 'counter')
  await counter.goto('/call-backs')
  await expect(counter.getByText(out!.code).first()).toBeVisible()
})
