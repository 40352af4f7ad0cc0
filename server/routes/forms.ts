import {
  beginFormBody,
  closeDoor,
  draftAnswer,
  draftBody,
  endFormLinks,
  getForm,
  makeFormLink,
  openDoor,
  submitForm,
} from '#shared/api/forms'
import { doorLimit, linkLimit } from '../auth/limits'
import { actorOf } from '../middleware/access'
import type { LinkActor } from '../services/actor'
import {
  beginForm,
  closeDoorService,
  endFormLinksService,
  formOf,
  makeFormLinkService,
  openDoorService,
  saveDraft,
  submitFormService,
} from '../services/forms'
import { answers, does, doesByLink, type Route } from './route'

/** The renter's form by link, and the links themselves. */
export const formRoutes: Route[] = [
  does(openDoor, openDoorService),
  does(closeDoor, closeDoorService),
  does(makeFormLink, makeFormLinkService),
  does(endFormLinks, endFormLinksService),
  {
    method: 'post',
    path: '/api/forms/begin',
    access: 'open',
    schemas: { body: beginFormBody },
    before: [linkLimit(), doorLimit()],
    handle: (deps) => async (req, res) => {
      await beginForm(deps, beginFormBody.parse(req.body))
      res.status(201).json({})
    },
  },
  answers(getForm, (deps, actor) => formOf(deps, actor)),
  {
    method: 'put',
    path: '/api/forms/mine',
    access: 'link',
    schemas: { body: draftBody, answer: draftAnswer },
    handle: (deps) => async (req, res) => {
      const draftVersion = await saveDraft(deps, actorOf<LinkActor>(req), draftBody.parse(req.body))
      res.json({ draftVersion })
    },
  },
  doesByLink(submitForm, submitFormService),
]
