import type { Request, RequestHandler } from 'express'
import type { ZodType } from 'zod'
import {
  commandAnswer,
  envelope,
  type Access,
  type Command,
  type Envelope,
  type Read,
} from '#shared/api/define'
import type { Deps } from '../deps'
import type { Actor, LinkActor, PersonActor } from '../services/actor'
import { runCommand, type Service } from '../services/commands'
import { actorOf } from '../middleware/access'
import { provePin } from '../services/pins'

/** One route as the application mounts it, the OpenAPI document describes it, and the test of roles walks it. */
export interface Route {
  method: 'get' | 'post' | 'put' | 'delete'
  path: `/api/${string}`
  access: Access
  /** What it takes and answers; absent for answers that are not JSON (a picture, say). */
  schemas: { body?: ZodType; params?: ZodType; query?: ZodType; answer?: ZodType }
  /** What stands before it, a limit of tries say. */
  before?: RequestHandler[]
  handle: (deps: Deps) => RequestHandler
}

type ActorFor<A extends Access> = A extends 'link' ? LinkActor : A extends 'open' ? Actor | null : PersonActor

/**
 * Whose PIN must come with a command: the person's id, or null where this body needs none. It is proved before the
 * command's transaction begins, so that a wrong try is counted whatever becomes of the command; the service then
 * asks `requirePin`.
 */
export type SignedBy<Body> = (body: Body, actor: PersonActor) => string | null

/** For commands that whoever acts signs with their own PIN. */
export const byOwnPin: SignedBy<unknown> = (_body, actor) => actor.personId

export interface CommandOptions<Body> {
  signedBy?: SignedBy<Body>
  /** What must follow once the command took effect, sent again or not: ending sessions, say. */
  afterwards?: (deps: Deps, actor: PersonActor, body: Body) => Promise<void> | void
}

/** The route of a command: parse the envelope, run the service once, answer its ids and event. */
export function does<Body, Ids>(
  definition: Command<string, Body, Ids>,
  service: Service<Body, Ids, PersonActor>,
  { signedBy, afterwards }: CommandOptions<NoInfer<Body>> = {},
): Route {
  return commandRoute<Body, Ids, PersonActor>(definition, service, {
    before: async (deps, actor, body) => {
      if (!signedBy) return
      const personId = signedBy(body, actor)
      if (personId) await provePin(deps, actor, personId)
      actor.provedPinOf = personId
    },
    afterwards,
  })
}

/** The route of a command that a renter sends by link. */
export function doesByLink<Body, Ids>(
  definition: Command<string, Body, Ids>,
  service: Service<Body, Ids, LinkActor>,
): Route {
  return commandRoute<Body, Ids, LinkActor>(definition, service)
}

function commandRoute<Body, Ids, A extends PersonActor | LinkActor>(
  definition: Command<string, Body, Ids>,
  service: Service<Body, Ids, A>,
  around: {
    before?: (deps: Deps, actor: A, body: Body) => Promise<void>
    afterwards?: (deps: Deps, actor: A, body: Body) => Promise<void> | void
  } = {},
): Route {
  const schema = envelope(definition)
  return {
    method: 'post',
    path: definition.path,
    access: definition.access,
    schemas: { body: schema, answer: commandAnswer(definition.ids) },
    handle: (deps) => async (req, res) => {
      const command = schema.parse(req.body) as Envelope<Body>
      const actor = actorOf<A>(req)
      await around.before?.(deps, actor, command.body)
      const answer = await runCommand(deps, actor, command, service)
      await around.afterwards?.(deps, actor, command.body)
      res.status(201).json(answer)
    },
  }
}

/** The route of a read: parse params and query, answer what the schema names and nothing else. */
export function answers<A extends Access, Params, Query, Answer>(
  definition: Read<Params, Query, Answer> & { access: A },
  reader: (deps: Deps, actor: ActorFor<A>, asked: { params: Params; query: Query }) => Promise<Answer>,
): Route {
  return {
    method: 'get',
    path: definition.path,
    access: definition.access,
    schemas: { params: definition.params, query: definition.query, answer: definition.answer },
    handle: (deps) => async (req: Request, res) => {
      const asked = { params: definition.params.parse(req.params), query: definition.query.parse(req.query) }
      res.json(definition.answer.parse(await reader(deps, req.actor as ActorFor<A>, asked)))
    },
  }
}
