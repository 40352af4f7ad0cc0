import { and, eq, sql } from 'drizzle-orm'
import type { BodyOf, IdsOf } from '#shared/api/define'
import type { stepCallBack } from '#shared/api/callBacks'
import { callBacks, callBackSteps } from '../db/schema/schema'
import { Problem } from '../errors'
import type { PersonActor } from './actor'
import type { CommandContext, Service } from './commands'

/** Writes down what was done about a call-back; the entry's own columns follow in the same transaction. */
export const stepCallBackService: Service<
  BodyOf<typeof stepCallBack>,
  IdsOf<typeof stepCallBack>,
  PersonActor
> = async (context, { callBackId, step, note }) => {
  const { tx, actor, occurredAt } = context
  await lockOpenCallBack(context, callBackId)
  if (step === 'closed' && !note && !(await wasChecked(context, callBackId)))
    throw new Problem('callBacks.reason', {})
  const [row] = await tx
    .insert(callBackSteps)
    .values({
      shopId: actor.shopId,
      callBackId,
      step,
      note,
      personId: actor.personId,
      deviceId: actor.deviceId,
      occurredAt,
    })
    .returning({ id: callBackSteps.id })
  await tx
    .update(callBacks)
    .set({
      lastStep: step,
      lastStepAt: occurredAt,
      stepCount: sql`${callBacks.stepCount} + 1`,
      ...(step === 'closed' ? { closedAt: occurredAt } : {}),
    })
    .where(eq(callBacks.id, callBackId))
  context.touchCallBacks()
  return { stepId: row!.id }
}

async function lockOpenCallBack({ tx, actor }: CommandContext, callBackId: string) {
  const [entry] = await tx
    .select({ closedAt: callBacks.closedAt })
    .from(callBacks)
    .where(and(eq(callBacks.id, callBackId), eq(callBacks.shopId, actor.shopId)))
    .for('update')
  if (!entry) throw new Problem('callBacks.unknown', {})
  if (entry.closedAt) throw new Problem('callBacks.closed', {})
}

async function wasChecked({ tx }: CommandContext, callBackId: string): Promise<boolean> {
  const checked = await tx.$count(
    callBackSteps,
    and(eq(callBackSteps.callBackId, callBackId), eq(callBackSteps.step, 'set_checked')),
  )
  return checked > 0
}
