import { and, desc, eq } from 'drizzle-orm'
import { RULES_VERSION } from '#shared/release/rules'
import type { EditionName } from '#shared/release/selectionTable'
import type { Reader } from '../../deps'
import { tableApprovals } from '../schema/schema'

/** Whether the shop's head technician signed this edition with the rules as they are now; the latest word counts. */
export async function tableApproved(db: Reader, shopId: string, edition: EditionName): Promise<boolean> {
  const [latest] = await db
    .select({ approved: tableApprovals.approved })
    .from(tableApprovals)
    .where(
      and(
        eq(tableApprovals.shopId, shopId),
        eq(tableApprovals.edition, edition),
        eq(tableApprovals.rulesVersion, RULES_VERSION),
      ),
    )
    .orderBy(desc(tableApprovals.recordedAt), desc(tableApprovals.id))
    .limit(1)
  return latest?.approved ?? false
}
