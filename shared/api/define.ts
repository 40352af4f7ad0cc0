import { z } from 'zod'
import type { Permission } from '#shared/permissions'
import { boardEvent } from '#shared/schemas/board'
import { id, instant } from '#shared/schemas/common'

/**
 * Every route of the API is described once, here and in the files beside: routes parse by it, the client sends by
 * it, the OpenAPI document and the test of roles are made from it.
 */

/** Who may call: a permission, anybody signed in, a renter's link, or anybody at all. */
export type Access = Permission | 'signed_in' | 'link' | 'open'

export interface Command<Kind extends string = string, Body = unknown, Ids = unknown> {
  kind: Kind
  path: `/api/${string}`
  access: Access
  body: z.ZodType<Body>
  ids: z.ZodType<Ids>
}

export interface Read<Params = unknown, Query = unknown, Answer = unknown> {
  path: `/api/${string}`
  access: Access
  params: z.ZodType<Params>
  query: z.ZodType<Query>
  answer: z.ZodType<Answer>
}

/** A command: something that happens in the shop. It travels in an envelope and takes effect once. */
export function command<const Kind extends string, Body, Ids>(definition: {
  kind: Kind
  path: `/api/${string}`
  access: Access
  body: z.ZodType<Body>
  ids: z.ZodType<Ids>
}): Command<Kind, Body, Ids> {
  return definition
}

const nothing = z.object({})

/** A read. `:name` parts of the path are its params. */
export function read<
  const A extends Access,
  Answer,
  Params = Record<string, never>,
  Query = Record<string, never>,
>(definition: {
  path: `/api/${string}`
  access: A
  params?: z.ZodType<Params>
  query?: z.ZodType<Query>
  answer: z.ZodType<Answer>
}): Read<Params, Query, Answer> & { access: A } {
  return {
    params: nothing as unknown as z.ZodType<Params>,
    query: nothing as unknown as z.ZodType<Query>,
    ...definition,
  }
}

/**
 * The envelope of every command. `id` is made by the client, once per intent: sending it again has no second
 * effect. `occurredAt` is the client's clock, `seenSeq` the last sequence number that its board had applied.
 */
export const envelope = <Kind extends string, Body>(definition: Pick<Command<Kind, Body>, 'kind' | 'body'>) =>
  z.strictObject({
    id,
    occurredAt: instant,
    seenSeq: z.number().int().min(0).nullable(),
    kind: z.literal(definition.kind),
    body: definition.body,
  })

export interface Envelope<Body = unknown> {
  id: string
  occurredAt: string
  seenSeq: number | null
  kind: string
  body: Body
}

/** What every command answers: its place in the shop's sequence, the event it caused, ids of what it made. */
export const commandAnswer = <Ids>(ids: z.ZodType<Ids>) =>
  z.object({ seq: z.number().int().nullable(), event: boardEvent.nullable(), ids })

export interface CommandAnswer<Ids = unknown> {
  seq: number | null
  event: z.infer<typeof boardEvent> | null
  ids: Ids
}

export type BodyOf<C> = C extends Command<string, infer Body, unknown> ? Body : never
export type IdsOf<C> = C extends Command<string, unknown, infer Ids> ? Ids : never
export type AnswerOf<R> = R extends Read<unknown, unknown, infer Answer> ? Answer : never
