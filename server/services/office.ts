import { officeChanges } from '../db/schema/schema'
import type { Tx } from '../deps'
import { deviceIdOf, personIdOf, type Actor } from './actor'

/** A command, or a request of the office that is none: then without its id. */
interface Change {
  tx: Tx
  actor: Actor
  commandId: string | null
  occurredAt: Date
}

/** Writes down that somebody changed these fields of a thing, a person or a setting: names of fields, no values. */
export async function noteOfficeChange(context: Change, kind: string, subjectId: string, fields: string[]) {
  await context.tx.insert(officeChanges).values({
    shopId: context.actor.shopId,
    kind,
    subjectId,
    fields,
    personId: personIdOf(context.actor),
    deviceId: deviceIdOf(context.actor),
    commandId: context.commandId,
    occurredAt: context.occurredAt,
  })
}

/** Names of the fields in which two values of the same shape differ. */
export function changedFields<T extends object>(before: T, after: Partial<T>): string[] {
  return Object.entries(after)
    .filter(([key, value]) => JSON.stringify(before[key as keyof T]) !== JSON.stringify(value))
    .map(([key]) => key)
}
