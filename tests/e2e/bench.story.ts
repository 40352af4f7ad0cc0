import { confirmChecks, enrol, fit, readSki, sign, someBoots, somePair, ticket, typeRead } from './steps'
import { expect, scan, signedIn, test } from './story'

test.describe('at the bench', () => {
  test('a value that differs is refused with what to do, and one heel notch off is kept when the window decides', async ({
    browser,
    shop,
  }) => {
    const page = await signedIn(browser, shop, 'manager')
    const technician = await enrol(page, shop, 'bench', 'bench')
    const [open] = await shop.sql<{ id: string }>(
      `select id from rentals r where state = 'open' and not exists (select from fittings f where f.rental_id = r.id) order by promised_at limit 1`,
    )
    const [boots, pair] = [await someBoots(shop, 305), await somePair(shop, 'ladder-16', 3)]
    await page.goto(`/counter/rentals/${open!.id}`)
    const fittingId = await fit(page, shop, boots, pair)
    await page.goto('/bench')
    await expect(page.getByText(/tickets wait/)).toBeVisible()
    // The scanned ski is the one in hand, and another scan takes the other.
    await scan(page, pair.right)
    await expect(page.getByText('Right ski, heel').first()).toBeVisible()
    await scan(page, pair.left)
    await expect(page.getByText('Left ski, heel').first()).toBeVisible()
    await expect(page.getByText('At which mark does it stand?').first()).toBeVisible()
    const fitting = await ticket(page, fittingId)
    const target = fitting.targets.left.heel

    // Nothing is filled in: the four boxes say that they are not read.
    await expect(page.getByText('not read yet').first()).toBeVisible()
    await typeRead(page, String(fitting.track.heel))
    await expect(page.getByText('Which value does the indicator show?').first()).toBeVisible()
    await typeRead(page, String(target + 1))
    await expect(
      page.getByText(new RegExp(`shows ${target + 1} and shall show ${target}`)).first(),
    ).toBeVisible()
    await page
      .getByRole('button', { name: /read it again/i })
      .last()
      .click()
    await expect(page.getByText('Which value does the indicator show?').first()).toBeVisible()
    await typeRead(page, String(target))
    await expect(page.getByText('At which mark does it stand?').first()).toBeVisible()
    await typeRead(page, String(fitting.track.toe))
    await expect(page.getByText('Which value does the indicator show?').first()).toBeVisible()
    await typeRead(page, String(target))
    await confirmChecks(page)

    // The right ski: the heel stands one notch longer, and the window is right.
    await readSki(page, fitting, 'right', { heel: fitting.track.heel + 1 })
    await confirmChecks(page)
    await sign(page, technician.pin)
    const parts = await shop.sql<{ side: string; verdict: string; heel: number }>(
      `select side, verdict, (reading ->> 'heel')::int heel from fitting_record_parts p join fitting_records r on r.id = p.record_id where r.fitting_id = $1 order by side`,
      [fittingId],
    )
    expect(parts).toEqual([
      { side: 'left', verdict: 'matches', heel: fitting.track.heel },
      { side: 'right', verdict: 'window_decides', heel: fitting.track.heel + 1 },
    ])
    const presets = await shop.sql<{ preset_heel: number }>(
      `select preset_heel from skis s join ski_pairs p on p.id = s.ski_pair_id where p.code = $1 order by side`,
      [pair.code],
    )
    expect(presets.map(({ preset_heel }) => preset_heel)).toEqual([
      fitting.track.heel,
      fitting.track.heel + 1,
    ])
  })

  test('boots that changed after the bench stop the hand-over, say why, and leave nothing to hand over', async ({
    browser,
    shop,
  }) => {
    const desk = await signedIn(browser, shop, 'counter')
    const [ready] = await shop.sql<{ id: string; boots_id: string; ski_pair_id: string }>(
      `select id, boots_id, ski_pair_id from fittings where state = 'prepared' order by number limit 1`,
    )
    const labels = await shop.sql<{ text: string }>(
      `select text from labels where item_id in ($1, $2) and until is null`,
      [ready!.boots_id, ready!.ski_pair_id],
    )
    await desk.goto(`/hand-over/${ready!.id}`)
    await expect(desk.getByText(/Scan the left ski/)).toBeVisible()

    // Meanwhile a head technician finds that the sole was typed wrong.
    const head = await signedIn(browser, shop, 'head')
    const before = (await (await head.request.get(`/api/boots/${ready!.boots_id}`)).json()) as Record<
      string,
      unknown
    > & { soleLengthMm: number; version: number }
    const { model, mondo, soleType, season, homeSiteId, rackPlace } = before
    const changed = await head.request.post('/api/boots/change', {
      headers: { origin: shop.url, 'x-notchwise': '1' },
      data: {
        id: crypto.randomUUID(),
        occurredAt: new Date().toISOString(),
        seenSeq: null,
        kind: 'boots.change',
        body: {
          id: ready!.boots_id,
          version: before.version,
          model,
          mondo,
          soleType,
          season,
          homeSiteId,
          rackPlace: rackPlace ?? '',
          soleLengthMm: before.soleLengthMm + 10,
        },
      },
    })
    expect(changed.status()).toBe(201)

    await expect(desk.getByText('This set is void').first()).toBeVisible()
    const [after] = await shop.sql<{ state: string; end_reason: string }>(
      'select state, end_reason from fittings where id = $1',
      [ready!.id],
    )
    expect(after).toEqual({ state: 'void', end_reason: 'sole_changed' })
    expect(labels).toHaveLength(4)
    for (const { text } of labels) await scan(desk, text)
    await expect(desk.getByRole('button', { name: 'Turn the screen to the renter' })).toHaveCount(0)
  })
})
