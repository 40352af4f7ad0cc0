import { fit, scanHeard, someBoots, somePair } from './steps'
import { expect, signedIn, test } from './story'

test.describe('two people at once', () => {
  test('two counters want one pair: one gets it, the other is told who has it', async ({ browser, shop }) => {
    const rentals = await shop.sql<{ id: string }>(
      `select id from rentals r where state = 'open' and not exists (select from fittings f where f.rental_id = r.id) order by promised_at limit 2`,
    )
    const pair = await somePair(shop, 'ladder-16', 5)
    const [first, second] = [await signedIn(browser, shop, 'counter'), await signedIn(browser, shop, 'desk')]
    const [mine, theirs] = [await someBoots(shop, 305), await someBoots(shop, 295)]
    await second.goto(`/counter/rentals/${rentals[1]!.id}`)
    await expect(second.getByText('Scan boots or skis')).toBeVisible()
    for (const label of [theirs.left, theirs.right, pair.left, pair.right]) {
      await scanHeard(second, label)
    }
    await first.goto(`/counter/rentals/${rentals[0]!.id}`)
    await fit(first, shop, mine, pair)
    await expect(second.getByText(/Dunja Pellworm/).first()).toBeVisible()
    await expect(second.getByRole('button', { name: /to the bench/ })).toBeDisabled()
    const open = await shop.sql(
      `select from fittings f join ski_pairs p on p.id = f.ski_pair_id where p.code = $1 and f.state = 'claimed'`,
      [pair.code],
    )
    expect(open).toHaveLength(1)
  })

  test('the board follows another screen, says when it is old, and catches up after the server was away', async ({
    browser,
    shop,
  }) => {
    const [board, desk] = [await signedIn(browser, shop, 'counter'), await signedIn(browser, shop, 'desk')]
    await board.goto('/board')
    await expect(board.getByText('Fit boots and skis')).toBeVisible()
    await expect(board.getByText(/^live /)).toBeVisible()
    const [waiting] = await shop.sql<{ id: string; name: string }>(
      `select r.id, n.first_name || ' ' || left(n.last_name, 1) || '.' as name from rentals r join renters n on n.id = r.renter_id where r.state = 'waiting' order by r.arrived_at limit 1`,
    )
    const take = (rentalId: string) =>
      desk.request.post('/api/rentals/take', {
        headers: { origin: shop.url, 'x-notchwise': '1' },
        data: {
          id: crypto.randomUUID(),
          occurredAt: new Date().toISOString(),
          seenSeq: null,
          kind: 'rentals.take',
          body: { rentalId },
        },
      })
    const band = (title: string) => board.getByRole('region', { name: new RegExp(title) })
    await expect(band('Take at the desk').getByText(waiting!.name)).toBeVisible()
    expect((await take(waiting!.id)).status()).toBe(201)
    await expect(band('Fit boots and skis').getByText(waiting!.name)).toBeVisible()

    await shop.stop()
    await expect(board.getByText(/not live since/).first()).toBeVisible({ timeout: 20_000 })
    // What happens while this screen hears nothing: the last event before silence is the one that is missed.
    await shop.restart()
    const [next] = await shop.sql<{ id: string; name: string }>(
      `select r.id, n.first_name || ' ' || left(n.last_name, 1) || '.' as name from rentals r join renters n on n.id = r.renter_id where r.state = 'waiting' order by r.arrived_at limit 1`,
    )
    expect((await take(next!.id)).status()).toBe(201)
    await expect(board.getByText(/^live /)).toBeVisible({ timeout: 20_000 })
    await expect(band('Fit boots and skis').getByText(next!.name)).toBeVisible()
    const [{ open }] = (await shop.sql<{ open: number }>(
      `select count(*)::int open from rentals r where state = 'open' and not exists (select from fittings f where f.rental_id = r.id and f.state in ('claimed', 'prepared'))`,
    )) as [{ open: number }]
    await expect(band('Fit boots and skis').locator('.count')).toHaveText(String(open))
  })
})
