import { correctRecord, listCallBacks, stepCallBack } from '#shared/api/callBacks'
import { callBackRows } from '../db/queries/callBacks'
import { stepCallBackService } from '../services/callBacks'
import { correctRecordService } from '../services/corrections'
import { answers, does, type Route } from './route'

export const callBackRoutes: Route[] = [
  does(correctRecord, correctRecordService),
  does(stepCallBack, stepCallBackService),
  answers(listCallBacks, async (deps, actor, { query }) => ({
    rows: await callBackRows(deps.db, actor.shopId, query.state),
  })),
]
