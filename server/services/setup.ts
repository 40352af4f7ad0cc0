import { createHash, randomBytes, timingSafeEqual } from 'node:crypto'
import { and, arrayContains, desc, eq, isNull } from 'drizzle-orm'
import type { z } from 'zod'
import type { setupBody } from '#shared/api/session'
import { hashSecret } from '../auth/passwords'
import { memberships, people, setupCodes, shops, shopSequences, shopTexts, sites } from '../db/schema/schema'
import type { Deps, Reader } from '../deps'
import { Problem } from '../errors'
import { defaultTexts } from './defaultTexts'
import { textSha256 } from './texts'

const codeHash = (code: string) =>
  createHash('sha256').update(code.replaceAll(/[\s-]/g, '').toUpperCase()).digest()

/** Whether the real shop still waits for its first manager. */
export async function setupIsOpen(db: Reader): Promise<boolean> {
  const managers = await db.$count(
    memberships,
    and(arrayContains(memberships.roles, ['manager']), isNull(memberships.endedAt)),
  )
  return managers === 0
}

/** A new one-time code for the first manager, to be printed by the start; null when there is a manager. Older codes end. */
export async function openSetupCode(deps: Pick<Deps, 'db' | 'now'>): Promise<string | null> {
  if (!(await setupIsOpen(deps.db))) return null
  const raw = randomBytes(10).toString('hex').toUpperCase()
  const code = raw.match(/.{5}/g)!.join('-')
  await deps.db.transaction(async (tx) => {
    await tx.update(setupCodes).set({ usedAt: deps.now() }).where(isNull(setupCodes.usedAt))
    await tx.insert(setupCodes).values({ codeSha256: codeHash(code) })
  })
  return code
}

/** Makes shop, site, first manager and the product's own text; the code is used up. */
export async function setUpShop(
  deps: Deps,
  body: z.infer<typeof setupBody>,
): Promise<{ personId: string; shopId: string }> {
  const passwordHash = await hashSecret(body.password)
  return deps.db.transaction(async (tx) => {
    const [open] = await tx
      .select()
      .from(setupCodes)
      .where(isNull(setupCodes.usedAt))
      .orderBy(desc(setupCodes.createdAt))
      .limit(1)
      .for('update')
    if (!open || !(await setupIsOpen(tx))) throw new Problem('setup.closed')
    if (!timingSafeEqual(open.codeSha256, codeHash(body.code))) throw new Problem('setup.wrong_code')
    await tx.update(setupCodes).set({ usedAt: deps.now() }).where(eq(setupCodes.id, open.id))
    const [shop] = await tx
      .insert(shops)
      .values({ name: body.shopName, zone: body.zone, locale: body.locale })
      .returning({ id: shops.id })
    const shopId = shop!.id
    await tx.insert(shopSequences).values({ shopId })
    await tx.insert(sites).values({ shopId, name: body.siteName })
    const [person] = await tx
      .insert(people)
      .values({ name: body.name, email: body.email, passwordHash, locale: body.locale })
      .returning({ id: people.id })
    await tx.insert(memberships).values({ shopId, personId: person!.id, roles: ['manager'] })
    const texts = defaultTexts().map((text) => ({
      ...text,
      shopId,
      version: 1,
      sha256: textSha256(text.body),
    }))
    await tx.insert(shopTexts).values(texts)
    return { personId: person!.id, shopId }
  })
}
