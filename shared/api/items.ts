import { z } from 'zod'
import { day, id, instant, itemKind, line, reason, side } from '#shared/schemas/common'
import { stepTargets } from '#shared/lifecycle/steps'
import { itemState } from '#shared/schemas/items'
import { command, read } from './define'

/** What a scanned or typed label names, and who has it. */
export const lookUpLabel = read({
  path: '/api/lookup',
  access: 'fleet.read',
  query: z.object({ label: z.string().trim().min(1).max(40) }),
  answer: z.discriminatedUnion('found', [
    z.object({
      found: z.literal(false),
      why: z.enum(['check_character', 'unfinished', 'not_ours', 'unknown', 'replaced']),
      /** What a label that was replaced had been on: S417L. */
      code: z.string().nullable(),
    }),
    z.object({
      found: z.literal(true),
      itemKind,
      itemId: id,
      code: z.string(),
      side: side.nullable(),
      state: itemState,
      since: instant,
      site: z.string(),
      rackPlace: z.string().nullable(),
      /** The open fitting that has it, and the clerk who took it. */
      fitting: z
        .object({
          id,
          number: z.number().int(),
          rentalId: id,
          by: z.string(),
          since: instant,
          state: z.string(),
        })
        .nullable(),
    }),
  ]),
})

/**
 * Steps of the life cycle that are no fitting, hand-over, return, inspection or hold. Which of them a role may take
 * is said per step.
 */
export const moveItem = command({
  kind: 'items.move',
  path: '/api/items/move',
  access: 'fleet.read',
  body: z.strictObject({
    itemKind,
    itemId: id,
    to: z.enum(stepTargets),
    rackPlace: line(20).default(''),
    reason: line(300).default(''),
  }),
  ids: z.object({ changeId: id }),
})

/** Takes back the step that was just made: within a minute, the same day for retired and sold. */
export const undoMove = command({
  kind: 'items.undo',
  path: '/api/items/undo',
  access: 'fleet.read',
  body: z.strictObject({ itemKind, itemId: id, changeId: id }),
  ids: z.object({ changeId: id }),
})

export const replaceLabel = command({
  kind: 'labels.replace',
  path: '/api/items/replace-label',
  access: 'fleet.write',
  body: z.strictObject({ itemKind, itemId: id, side }),
  ids: z.object({ labelId: id }),
})

export const openQuarantine = command({
  kind: 'quarantine.open',
  path: '/api/quarantine/open',
  access: 'quarantine.open',
  body: z.strictObject({ itemKind, itemId: id, reason, ownerId: id, reviewOn: day }),
  ids: z.object({ quarantineId: id }),
})

export const reviewQuarantine = command({
  kind: 'quarantine.review',
  path: '/api/quarantine/review',
  access: 'quarantine.release',
  body: z.strictObject({ quarantineId: id, ownerId: id, reviewOn: day }),
  ids: z.object({ quarantineId: id }),
})

export const releaseQuarantine = command({
  kind: 'quarantine.release',
  path: '/api/quarantine/release',
  access: 'quarantine.release',
  body: z.strictObject({ quarantineId: id, to: z.enum(['unchecked', 'service', 'retired']), reason }),
  ids: z.object({ quarantineId: id }),
})

export const listQuarantine = read({
  path: '/api/quarantine',
  access: 'fleet.read',
  answer: z.object({
    rows: z.array(
      z.object({
        id,
        itemKind,
        itemId: id,
        code: z.string(),
        reason: z.string(),
        owner: z.string(),
        ownerId: id,
        reviewOn: day,
        openedAt: instant,
        openedBy: z.string().nullable(),
        releasedAt: instant.nullable(),
        releasedTo: z.string().nullable(),
        releaseReason: z.string().nullable(),
      }),
    ),
    /** Who may own a hold. */
    owners: z.array(z.object({ id, name: z.string() })),
  }),
})
