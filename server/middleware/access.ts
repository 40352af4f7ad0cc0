import type { Request, RequestHandler } from 'express'
import type { Access } from '#shared/api/define'
import { may } from '#shared/permissions'
import { Problem } from '../errors'
import type { Actor } from '../services/actor'

declare module 'express-serve-static-core' {
  interface Request {
    /** Who acts; null for a stranger. Set for every API request. */
    actor: Actor | null
  }
}

/** Lets through whom the route's access names: 401 for a stranger, 403 for the wrong role. */
export function requireAccess(access: Access): RequestHandler {
  return (req, _res, next) => {
    const { actor } = req
    if (access === 'open') return next()
    if (access === 'link') {
      if (actor?.kind !== 'link') throw new Problem('links.unknown')
      return next()
    }
    if (actor?.kind !== 'person') throw new Problem('session.missing')
    if (access !== 'signed_in' && !may(actor.roles, access))
      throw new Problem('session.role', { permission: access })
    next()
  }
}

/** The actor that `requireAccess` let through. */
export function actorOf<A extends Actor>(req: Request): A {
  if (!req.actor) throw new Problem('session.missing')
  return req.actor as A
}
