import { and, desc, eq, ilike, or, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { getSkiPair, listSkiPairs, SkiPairRow } from '#shared/api/skiPairs'
import type { AnswerOf } from '#shared/api/define'
import { Problem } from '../../errors'
import type { Reader } from '../../deps'
import {
  bindingModels,
  fittings,
  people,
  presetChanges,
  sites,
  skiModels,
  skiPairs,
  skis,
} from '../schema/schema'
import { fitsSoles } from './fitsSoles'
import { bindingModelById } from './models'
import { fittingsOf, historyOf, labelsOf, openHold, presetsOf, sidesOut } from './items'
import { contains, iso, numberOf, ordered } from './lists'

const row = {
  id: skiPairs.id,
  code: skiPairs.code,
  lengthCm: skiPairs.lengthCm,
  skiModel: skiModels.name,
  bindingModelId: skiPairs.bindingModelId,
  bindingModel: bindingModels.name,
  state: skiPairs.state,
  since: skiPairs.stateSince,
  siteId: skiPairs.siteId,
  site: sites.name,
  rackPlace: skiPairs.rackPlace,
  track: bindingModels.track,
  contentSha256: bindingModels.contentSha256,
  offsetMm: skiModels.offsetMm,
  rentals: sql<number>`(select count(*)::int from ${fittings} where ${fittings.skiPairId} = ${skiPairs.id} and ${fittings.state} = 'handed_over')`,
}

const joined = (db: Reader) =>
  db
    .select(row)
    .from(skiPairs)
    .innerJoin(skiModels, eq(skiModels.id, skiPairs.skiModelId))
    .innerJoin(bindingModels, eq(bindingModels.id, skiPairs.bindingModelId))
    .innerJoin(sites, eq(sites.id, skiPairs.siteId))

/** A page of the fleet. */
export async function skiPairList(db: Reader, shopId: string, asked: z.infer<typeof listSkiPairs.query>) {
  const { search, state, site, bindingModel, sort, descending, page, size } = asked
  const where = and(
    eq(skiPairs.shopId, shopId),
    state ? eq(skiPairs.state, state) : undefined,
    site ? eq(skiPairs.siteId, site) : undefined,
    bindingModel ? eq(skiPairs.bindingModelId, bindingModel) : undefined,
    search
      ? or(
          ilike(skiPairs.code, contains(search)),
          ilike(skiPairs.rackPlace, contains(search)),
          ilike(skiModels.name, contains(search)),
          /^\d{2,3}$/.test(search) ? eq(skiPairs.lengthCm, Number(search)) : undefined,
        )
      : undefined,
  )
  const by = {
    code: numberOf(skiPairs.code),
    lengthCm: skiPairs.lengthCm,
    state: skiPairs.state,
    rackPlace: skiPairs.rackPlace,
    since: skiPairs.stateSince,
  }[sort]
  const found = await joined(db)
    .where(where)
    .orderBy(ordered(by, descending), numberOf(skiPairs.code))
    .limit(size)
    .offset((page - 1) * size)
  const [counted] = await db
    .select({ total: sql<number>`count(*)::int` })
    .from(skiPairs)
    .innerJoin(skiModels, eq(skiModels.id, skiPairs.skiModelId))
    .where(where)
  return { rows: await withPresets(db, found), total: counted?.total ?? 0 }
}

async function withPresets(db: Reader, found: Awaited<ReturnType<typeof joined>>): Promise<SkiPairRow[]> {
  const presets = await presetsOf(
    db,
    found.map(({ id }) => id),
  )
  return found.map(({ track, contentSha256, offsetMm, ...pair }) => {
    const lines = presets.get(pair.id) ?? []
    return {
      ...pair,
      state: pair.state as SkiPairRow['state'],
      since: iso(pair.since),
      presets: lines,
      fitsSoles: fitsSoles({ track, contentSha256, offsetMm }, lines),
    }
  })
}

/** A pair with all that is known of it. */
export async function skiPairById(
  db: Reader,
  shopId: string,
  id: string,
): Promise<AnswerOf<typeof getSkiPair>> {
  const found = await joined(db).where(and(eq(skiPairs.shopId, shopId), eq(skiPairs.id, id)))
  const [pair] = await withPresets(db, found)
  if (!pair) throw new Problem('items.unknown')
  const [own] = await db
    .select({
      season: skiPairs.season,
      version: skiPairs.version,
      homeSiteId: skiPairs.homeSiteId,
      skiModel: skiModels,
    })
    .from(skiPairs)
    .innerJoin(skiModels, eq(skiModels.id, skiPairs.skiModelId))
    .where(eq(skiPairs.id, id))
  return {
    ...pair,
    ...own!,
    binding: await bindingModelById(db, shopId, pair.bindingModelId),
    labels: await labelsOf(db, id),
    history: await historyOf(db, id),
    fittings: await fittingsOf(db, 'ski_pair', id),
    presetHistory: await presetHistoryOf(db, id),
    missing: await sidesOut(db, id),
    holdId: await openHold(db, id),
  }
}

async function presetHistoryOf(db: Reader, skiPairId: string) {
  const rows = await db
    .select({
      side: skis.side,
      toe: presetChanges.presetToe,
      heel: presetChanges.presetHeel,
      turns: presetChanges.presetTurns,
      at: presetChanges.occurredAt,
      reason: presetChanges.reason,
      person: people.name,
    })
    .from(presetChanges)
    .innerJoin(skis, eq(skis.id, presetChanges.skiId))
    .leftJoin(people, eq(people.id, presetChanges.personId))
    .where(eq(skis.skiPairId, skiPairId))
    .orderBy(desc(presetChanges.occurredAt), desc(presetChanges.presetVersion))
    .limit(24)
  return rows.map((line) => ({ ...line, at: iso(line.at) }))
}
