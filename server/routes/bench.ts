import type { RequestHandler } from 'express'
import { getHandOver, getReadySets, recordHandOver } from '#shared/api/handOvers'
import { getRecord, signRecord } from '#shared/api/records'
import {
  cannotBeSet,
  decideReading,
  getBenchQueue,
  getTicket,
  leaveTicket,
  openTicket,
  readSki,
  standsElsewhere,
} from '#shared/api/tickets'
import { readySets } from '../db/queries/handOvers'
import { recordById } from '../db/queries/records'
import { benchQueue, ticketDetail } from '../db/queries/tickets'
import { actorOf } from '../middleware/access'
import type { PersonActor } from '../services/actor'
import { recordHandOverService } from '../services/handOvers'
import { handOverToSign } from '../services/handOverToSign'
import { signRecordService } from '../services/records'
import {
  cannotBeSetService,
  decideReadingService,
  leaveTicketService,
  openTicketService,
  readSkiService,
  standsElsewhereService,
} from '../services/tickets'
import { voidingWhatChanged } from '../services/voidChanged'
import { answers, byOwnPin, does, type Route } from './route'

/** A command that finds a fitting changed leaves it void behind. */
function voiding(route: Route): Route {
  return {
    ...route,
    handle: (deps) => {
      const inner = route.handle(deps)
      const outer: RequestHandler = (req, res, next) => {
        // Asked for only after the body was parsed and its fitting found changed.
        const fittingIdOf = () => (req.body as { body: { fittingId: string } }).body.fittingId
        return voidingWhatChanged(deps, actorOf<PersonActor>(req), fittingIdOf, async () => {
          await inner(req, res, next)
        })
      }
      return outer
    },
  }
}

/** From the queue at the bench to the set that leaves. */
export const benchRoutes: Route[] = [
  answers(getBenchQueue, async (deps, { shopId, siteId }, { query }) => ({
    tickets: await benchQueue(deps.db, shopId, query.siteId ?? siteId),
  })),
  answers(getTicket, (deps, { shopId }, { params }) => ticketDetail(deps.db, shopId, params.id)),
  does(openTicket, openTicketService),
  does(leaveTicket, leaveTicketService),
  does(standsElsewhere, standsElsewhereService),
  does(readSki, readSkiService),
  does(decideReading, decideReadingService),
  does(cannotBeSet, cannotBeSetService),
  voiding(does(signRecord, signRecordService, { signedBy: byOwnPin })),
  answers(getRecord, (deps, { shopId }, { params }) => recordById(deps.db, shopId, params.id)),
  answers(getReadySets, async (deps, { shopId, siteId }, { query }) => ({
    sets: await readySets(deps.db, shopId, query.siteId ?? siteId),
  })),
  answers(getHandOver, (deps, { shopId }, { params, query }) =>
    handOverToSign(deps.db, shopId, params.id, query.locale),
  ),
  voiding(does(recordHandOver, recordHandOverService)),
]
