import { changeBoots, createBoots, getBoots, listBoots } from '#shared/api/boots'
import {
  listQuarantine,
  lookUpLabel,
  moveItem,
  openQuarantine,
  releaseQuarantine,
  replaceLabel,
  reviewQuarantine,
  undoMove,
} from '#shared/api/items'
import {
  approveBindingModel,
  getBindingModel,
  listBindingModels,
  listSkiModels,
  saveBindingModel,
  saveSkiModel,
  setWindowPicture,
} from '#shared/api/models'
import { changeSkiPair, createSkiPair, getSkiPair, listSkiPairs, readPreset } from '#shared/api/skiPairs'
import { bootsById, bootsList } from '../db/queries/boots'
import { bindingModelById, bindingModelList, skiModelList, windowPicture } from '../db/queries/models'
import { quarantineList } from '../db/queries/quarantine'
import { skiPairById, skiPairList } from '../db/queries/skiPairs'
import { Problem } from '../errors'
import { actorOf } from '../middleware/access'
import type { PersonActor } from '../services/actor'
import { changeBootsService, createBootsService } from '../services/boots'
import { lookUp, moveItemService, replaceLabelService, undoMoveService } from '../services/items'
import {
  approveBindingModelService,
  saveBindingModelService,
  saveSkiModelService,
  setWindowPictureService,
} from '../services/models'
import {
  openQuarantineService,
  releaseQuarantineService,
  reviewQuarantineService,
} from '../services/quarantine'
import { changeSkiPairService, createSkiPairService, readPresetService } from '../services/skiPairs'
import { answers, does, type Route } from './route'

export const thingsRoutes: Route[] = [
  answers(listSkiModels, async (deps, { shopId }) => ({ rows: await skiModelList(deps.db, shopId) })),
  does(saveSkiModel, saveSkiModelService),
  answers(listBindingModels, async (deps, { shopId }) => ({ rows: await bindingModelList(deps.db, shopId) })),
  answers(getBindingModel, (deps, { shopId }, { params }) => bindingModelById(deps.db, shopId, params.id)),
  {
    method: 'get',
    path: '/api/binding-models/:id/window-picture',
    access: 'fleet.read',
    schemas: { params: getBindingModel.params },
    handle: (deps) => async (req, res) => {
      const { id } = getBindingModel.params.parse(req.params)
      const found = await windowPicture(deps.db, actorOf<PersonActor>(req).shopId, id)
      if (!found) throw new Problem('items.unknown')
      res.type(found.type).send(found.picture)
    },
  },
  does(saveBindingModel, saveBindingModelService),
  does(setWindowPicture, setWindowPictureService),
  does(approveBindingModel, approveBindingModelService),
  answers(listSkiPairs, (deps, { shopId }, { query }) => skiPairList(deps.db, shopId, query)),
  answers(getSkiPair, (deps, { shopId }, { params }) => skiPairById(deps.db, shopId, params.id)),
  does(createSkiPair, createSkiPairService),
  does(changeSkiPair, changeSkiPairService),
  does(readPreset, readPresetService),
  answers(listBoots, (deps, { shopId }, { query }) => bootsList(deps.db, shopId, query)),
  answers(getBoots, (deps, { shopId }, { params }) => bootsById(deps.db, shopId, params.id)),
  does(createBoots, createBootsService),
  does(changeBoots, changeBootsService),
  answers(lookUpLabel, (deps, { shopId }, { query }) => lookUp(deps.db, shopId, query.label)),
  does(moveItem, moveItemService),
  does(undoMove, undoMoveService),
  does(replaceLabel, replaceLabelService),
  answers(listQuarantine, (deps, { shopId }) => quarantineList(deps.db, shopId)),
  does(openQuarantine, openQuarantineService),
  does(reviewQuarantine, reviewQuarantineService),
  does(releaseQuarantine, releaseQuarantineService),
]
