import type { AnswerOf, BodyOf, IdsOf } from '#shared/api/define'
import type { approveTableEdition, getTableEdition, withdrawTableEdition } from '#shared/api/tableEdition'
import { ruleStandings, RULES_VERSION } from '#shared/release/rules'
import { editions, selectionRows, type EditionName } from '#shared/release/selectionTable'
import { shopEdition, tableApproval } from '../db/queries/tableApproval'
import { tableApprovals } from '../db/schema/schema'
import type { Reader } from '../deps'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { Service } from './commands'

type Does<C> = Service<BodyOf<C>, IdsOf<C>, PersonActor>

/** The whole table with where each part comes from, and what the shop said of it. */
export async function tableEditionOf(db: Reader, shopId: string): Promise<AnswerOf<typeof getTableEdition>> {
  const edition = editions[shopEdition]
  return {
    edition: edition.name,
    rulesVersion: RULES_VERSION,
    approval: await tableApproval(db, shopId),
    standing: edition.standing,
    columns: [...edition.columns],
    rows: selectionRows.map((row) => ({ ...row, values: [...edition.values[row.code]] })),
    exceptions: [...edition.exceptions],
    rules: Object.entries(ruleStandings).map(([rule, standing]) => ({ rule, standing })),
  }
}

/** Refused for rules that are no longer those of this program: they were not what was compared. */
export const approveTableEditionService: Does<typeof approveTableEdition> = async (context, body) => {
  if (body.rulesVersion !== RULES_VERSION || body.edition !== shopEdition)
    throw new Problem('tableEdition.changed')
  return said(context, { edition: body.edition, approved: true, comparedWith: body.comparedWith })
}

/** The reason stands where an approval says what it was compared with. */
export const withdrawTableEditionService: Does<typeof withdrawTableEdition> = async (context, body) => {
  const { approved } = await tableApproval(context.tx, context.actor.shopId, body.edition)
  if (!approved) throw new Problem('tableEdition.changed')
  return said(context, { edition: body.edition, approved: false, comparedWith: body.reason })
}

async function said(
  { tx, actor, occurredAt }: Parameters<Does<typeof approveTableEdition>>[0],
  words: { edition: EditionName; approved: boolean; comparedWith: string },
) {
  const [approval] = await tx
    .insert(tableApprovals)
    .values({
      shopId: actor.shopId,
      rulesVersion: RULES_VERSION,
      personId: actor.personId,
      occurredAt,
      ...words,
    })
    .returning({ id: tableApprovals.id })
  return { approvalId: approval!.id }
}
