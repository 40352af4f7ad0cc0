import { z } from 'zod'
import { id, instant, reason, side } from '#shared/schemas/common'
import { partReading, seenReading } from '#shared/schemas/records'
import { command, read } from './define'
import { getFitting } from './fittings'

/** A fitting as the bench sees it: who has it, where its units really stood, what was read back. */

/** Takes a ticket to the bench. Somebody else's is taken over only when asked for; both names are kept. */
export const openTicket = command({
  kind: 'tickets.open',
  path: '/api/tickets/open',
  access: 'tickets.work',
  body: z.strictObject({ fittingId: id, takeOver: z.boolean().default(false) }),
  ids: z.object({ fittingId: id }),
})

/** Puts a ticket back into the queue; what was read stays. */
export const leaveTicket = command({
  kind: 'tickets.leave',
  path: '/api/tickets/leave',
  access: 'tickets.work',
  body: z.strictObject({ fittingId: id }),
  ids: z.object({ fittingId: id }),
})

/** The units of a ski stand elsewhere than was believed. Notches, and turns from the screw's neutral mark. */
export const standsElsewhere = command({
  kind: 'tickets.standsElsewhere',
  path: '/api/tickets/stands-elsewhere',
  access: 'tickets.work',
  body: z.strictObject({
    fittingId: id,
    skiId: id,
    toe: z.number().int(),
    heel: z.number().int(),
    turns: z.number().nullable(),
    /** The number of the preset that the screen showed. */
    presetVersion: z.number().int(),
  }),
  ids: z.object({ skiId: id }),
})

/** What one ski shows after it was set, boot clicked in. The server judges it against the fitting's targets. */
export const readSki = command({
  kind: 'tickets.readSki',
  path: '/api/tickets/read-ski',
  access: 'tickets.work',
  body: z.strictObject({
    fittingId: id,
    side,
    reading: seenReading,
    /** The number of the preset that the screen showed. */
    presetVersion: z.number().int(),
  }),
  ids: z.object({ readingId: id }),
})

/** A head technician lets a mark or a screw stand that differs. Never a value. */
export const decideReading = command({
  kind: 'tickets.decideReading',
  path: '/api/tickets/decide-reading',
  access: 'fittings.decide',
  body: z.strictObject({ fittingId: id, side, reading: partReading, reason }),
  ids: z.object({ decisionId: id }),
})

/** This pair cannot be set for this renter: the fitting ends, the pair goes to service or waits unchecked. */
export const cannotBeSet = command({
  kind: 'tickets.cannotBeSet',
  path: '/api/tickets/cannot-be-set',
  access: 'tickets.work',
  body: z.strictObject({ fittingId: id, reason, to: z.enum(['service', 'unchecked']) }),
  ids: z.object({ fittingId: id }),
})

const person = z.object({ id, name: z.string() })

export const queuedTicket = z.object({
  fittingId: id,
  /** Short number of the day, as it is called out. */
  number: z.number().int(),
  /** First name and initial. */
  name: z.string(),
  pairCode: z.string(),
  rackPlace: z.string().nullable(),
  /** Null: the renter's own boots. */
  bootsCode: z.string().nullable(),
  promisedAt: instant,
  claimedAt: instant,
  claimedBy: z.string(),
  /** From this moment on an unfinished claim is shown as ageing. */
  agesAt: instant,
  heldBy: person.nullable(),
  heldSince: instant.nullable(),
  /** Notches over both skis, toe and heel; null where a preset is unknown. */
  notches: z.number().int().nullable(),
  /** Skis that were read back. */
  read: z.array(side),
})
export type QueuedTicket = z.infer<typeof queuedTicket>

/** Open tickets by promised time, of one site or of the whole shop. */
export const getBenchQueue = read({
  path: '/api/bench/queue',
  access: 'fittings.read',
  query: z.object({ siteId: id.optional() }),
  answer: z.object({ tickets: z.array(queuedTicket) }),
})

/** A fitting with what the bench needs beside: readings that a head technician let stand. */
export const getTicket = read({
  path: '/api/tickets/:id',
  access: 'fittings.read',
  params: z.object({ id }),
  answer: z.object({
    fitting: getFitting.answer,
    agesAt: instant,
    decided: z.array(
      z.object({ id, side, reading: partReading, reason: z.string(), by: z.string(), at: instant }),
    ),
  }),
})
