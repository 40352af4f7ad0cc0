import { and, eq, ilike, or, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { BootsRow, getBoots, listBoots } from '#shared/api/boots'
import type { AnswerOf } from '#shared/api/define'
import { Problem } from '../../errors'
import type { Reader } from '../../deps'
import { boots, sites } from '../schema/schema'
import { fittingsOf, historyOf, labelsOf, openHold, sidesOut } from './items'
import { contains, iso, numberOf, ordered } from './lists'

const joined = (db: Reader) =>
  db
    .select({
      id: boots.id,
      code: boots.code,
      model: boots.model,
      mondo: boots.mondo,
      soleLengthMm: boots.soleLengthMm,
      soleType: boots.soleType,
      state: boots.state,
      since: boots.stateSince,
      siteId: boots.siteId,
      site: sites.name,
      rackPlace: boots.rackPlace,
    })
    .from(boots)
    .innerJoin(sites, eq(sites.id, boots.siteId))

function asRow(row: Awaited<ReturnType<typeof joined>>[number]): BootsRow {
  return {
    ...row,
    state: row.state as BootsRow['state'],
    soleType: row.soleType as BootsRow['soleType'],
    since: iso(row.since),
  }
}

/** A page of the boots. */
export async function bootsList(db: Reader, shopId: string, asked: z.infer<typeof listBoots.query>) {
  const { search, state, site, mondo, sort, descending, page, size } = asked
  const where = and(
    eq(boots.shopId, shopId),
    state ? eq(boots.state, state) : undefined,
    site ? eq(boots.siteId, site) : undefined,
    mondo ? eq(boots.mondo, mondo) : undefined,
    search
      ? or(
          ilike(boots.code, contains(search)),
          ilike(boots.rackPlace, contains(search)),
          ilike(boots.model, contains(search)),
          /^\d{3}$/.test(search) ? eq(boots.soleLengthMm, Number(search)) : undefined,
        )
      : undefined,
  )
  const by = {
    code: numberOf(boots.code),
    mondo: boots.mondo,
    soleLengthMm: boots.soleLengthMm,
    state: boots.state,
    rackPlace: boots.rackPlace,
  }[sort]
  const found = await joined(db)
    .where(where)
    .orderBy(ordered(by, descending), numberOf(boots.code))
    .limit(size)
    .offset((page - 1) * size)
  const [counted] = await db
    .select({ total: sql<number>`count(*)::int` })
    .from(boots)
    .where(where)
  return { rows: found.map(asRow), total: counted?.total ?? 0 }
}

/** A pair of boots with all that is known of it. */
export async function bootsById(db: Reader, shopId: string, id: string): Promise<AnswerOf<typeof getBoots>> {
  const [found] = await joined(db).where(and(eq(boots.shopId, shopId), eq(boots.id, id)))
  if (!found) throw new Problem('items.unknown')
  const [own] = await db
    .select({ season: boots.season, version: boots.version, homeSiteId: boots.homeSiteId })
    .from(boots)
    .where(eq(boots.id, id))
  return {
    ...asRow(found),
    ...own!,
    labels: await labelsOf(db, id),
    history: await historyOf(db, id),
    fittings: await fittingsOf(db, 'boots', id),
    missing: await sidesOut(db, id),
    holdId: await openHold(db, id),
  }
}
