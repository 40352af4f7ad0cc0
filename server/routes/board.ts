import { getBoard, getBoardNames, getBoardSince } from '#shared/api/board'
import { boardNames, boardSnapshot } from '../db/queries/board'
import { boardSince } from '../services/board'
import { answers, type Route } from './route'

export const boardRoutes: Route[] = [
  answers(getBoard, (deps, actor) => boardSnapshot(deps.db, actor.shopId, deps.now())),
  answers(getBoardSince, (deps, actor, { params }) => boardSince(deps, actor.shopId, params.seq)),
  answers(getBoardNames, async (deps, { shopId }) => ({ names: await boardNames(deps.db, shopId) })),
]
