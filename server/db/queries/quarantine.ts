import { and, asc, desc, eq, isNull, sql } from 'drizzle-orm'
import { alias } from 'drizzle-orm/pg-core'
import type { listQuarantine } from '#shared/api/items'
import type { AnswerOf } from '#shared/api/define'
import type { Reader } from '../../deps'
import { boots, memberships, people, quarantines, skiPairs } from '../schema/schema'
import { iso, isoOrNull } from './lists'

/** Holds, open ones first by their review date, and who may own one. */
export async function quarantineList(db: Reader, shopId: string): Promise<AnswerOf<typeof listQuarantine>> {
  const owner = alias(people, 'owner')
  const opener = alias(people, 'opener')
  const rows = await db
    .select({
      hold: quarantines,
      owner: owner.name,
      opener: opener.name,
      code: sql<string>`coalesce(${skiPairs.code}, ${boots.code})`,
    })
    .from(quarantines)
    .innerJoin(owner, eq(owner.id, quarantines.ownerId))
    .leftJoin(opener, eq(opener.id, quarantines.openedBy))
    .leftJoin(skiPairs, eq(skiPairs.id, quarantines.itemId))
    .leftJoin(boots, eq(boots.id, quarantines.itemId))
    .where(eq(quarantines.shopId, shopId))
    .orderBy(
      sql`${quarantines.releasedAt} is not null`,
      asc(quarantines.reviewOn),
      desc(quarantines.openedAt),
    )
    .limit(200)
  const owners = await db
    .select({ id: people.id, name: people.name })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(and(eq(memberships.shopId, shopId), isNull(memberships.endedAt)))
    .orderBy(asc(people.name))
  return {
    owners,
    rows: rows.map(({ hold, code, owner: ownerName, opener: openedBy }) => ({
      id: hold.id,
      itemKind: hold.itemKind,
      itemId: hold.itemId,
      code,
      reason: hold.reason,
      owner: ownerName,
      ownerId: hold.ownerId,
      reviewOn: hold.reviewOn,
      openedAt: iso(hold.openedAt),
      openedBy,
      releasedAt: isoOrNull(hold.releasedAt),
      releasedTo: hold.releasedTo,
      releaseReason: hold.releaseReason,
    })),
  }
}
