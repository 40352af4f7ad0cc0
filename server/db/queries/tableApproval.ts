import { and, desc, eq } from 'drizzle-orm'
import type { TableApproval } from '#shared/api/tableEdition'
import { RULES_VERSION } from '#shared/release/rules'
import type { EditionName } from '#shared/release/selectionTable'
import type { Reader } from '../../deps'
import { people, tableApprovals } from '../schema/schema'

/** The edition that a shop's fittings are computed with. */
export const shopEdition: EditionName = 'eight-column'

/** What the shop's head technician said last of this edition with the rules as they are now. */
export async function tableApproval(
  db: Reader,
  shopId: string,
  edition: EditionName = shopEdition,
): Promise<TableApproval> {
  const [latest] = await db
    .select({
      approved: tableApprovals.approved,
      words: tableApprovals.comparedWith,
      at: tableApprovals.occurredAt,
      by: people.name,
    })
    .from(tableApprovals)
    .innerJoin(people, eq(people.id, tableApprovals.personId))
    .where(
      and(
        eq(tableApprovals.shopId, shopId),
        eq(tableApprovals.edition, edition),
        eq(tableApprovals.rulesVersion, RULES_VERSION),
      ),
    )
    .orderBy(desc(tableApprovals.recordedAt), desc(tableApprovals.id))
    .limit(1)
  if (!latest) return { approved: false, withdrawn: null }
  const { by, words } = latest
  const at = latest.at.toISOString()
  return latest.approved
    ? { approved: true, by, at, comparedWith: words }
    : { approved: false, withdrawn: { by, at, reason: words } }
}
