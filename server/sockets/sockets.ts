import type { Server as HttpServer } from 'node:http'
import type { RequestHandler } from 'express'
import { Server } from 'socket.io'
import { may } from '#shared/permissions'
import type { BoardEvent } from '#shared/schemas/board'
import { personActor, type SessionRequest } from '../auth/actors'
import { headSequence } from '../db/queries/board'
import type { Deps } from '../deps'
import { originAllowed } from '../middleware/origin'

/** How often every screen hears the head of its shop's sequence, so that a lost last event is noticed. */
export const headEveryMs = 5000

export interface Sockets {
  publish: Deps['publish']
  dropSockets: Deps['dropSockets']
  close: () => Promise<void>
}

const shopRoom = (shopId: string) => `shop:${shopId}`
const personRoom = (personId: string) => `person:${personId}`
const sessionRoom = (sessionId: string) => `session:${sessionId}`

/** Events down to the screens of a shop. Nothing comes up this way: commands travel by HTTP. */
export function attachSockets(
  http: HttpServer,
  deps: Omit<Deps, 'publish' | 'dropSockets'>,
  session: RequestHandler[],
): Sockets {
  const io = new Server(http, {
    serveClient: false,
    maxHttpBufferSize: 10_000,
    allowRequest: (req, answer) =>
      answer(null, originAllowed(req.headers.origin, req.headers.host, deps.origins)),
  })
  for (const handler of session) {
    io.engine.use((req: { _query?: { sid?: string } }, res: unknown, next: () => void) => {
      // Only the handshake needs the session; the later packets of a socket belong to it.
      if (req._query?.sid === undefined) (handler as unknown as (...args: unknown[]) => void)(req, res, next)
      else next()
    })
  }

  io.use((socket, next) => {
    const request = socket.request as unknown as SessionRequest & { sessionID: string }
    personActor(deps, request).then(
      async (actor) => {
        if (!actor || !may(actor.roles, 'board.read')) return next(new Error('session.missing'))
        await socket.join([
          shopRoom(actor.shopId),
          personRoom(actor.personId),
          sessionRoom(request.sessionID),
        ])
        next()
      },
      () => next(new Error('server.database_away')),
    )
  })

  const sayHead = async () => {
    const shops = [...io.of('/').adapter.rooms.keys()].filter((room) => room.startsWith('shop:'))
    for (const room of shops) {
      io.to(room).emit('head', {
        seq: await headSequence(deps.db, room.slice(5)),
        at: deps.now().toISOString(),
      })
    }
  }
  const heads = setInterval(() => {
    sayHead().catch((error: unknown) =>
      deps.log.warn({ err: error }, 'no head sequence: the database is away'),
    )
  }, headEveryMs)

  return {
    publish: (shopId: string, event: BoardEvent) => void io.to(shopRoom(shopId)).emit('event', event),
    dropSockets: ({ personId, sessionId }) => {
      if (personId) io.in(personRoom(personId)).disconnectSockets(true)
      if (sessionId) io.in(sessionRoom(sessionId)).disconnectSockets(true)
    },
    close: async () => {
      clearInterval(heads)
      await io.close()
    },
  }
}
