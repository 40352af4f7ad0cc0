import { enrolAnswer, enrolBody, enrolPath, listDevices, revokeDevice } from '#shared/api/devices'
import {
  changePerson,
  createPerson,
  disablePerson,
  enablePerson,
  listColleagues,
  listPeople,
  setPasswordBody,
  setPasswordPath,
} from '#shared/api/people'
import {
  changeShop,
  createSite,
  getShop,
  listTexts,
  renameSite,
  reviewText,
  writeText,
} from '#shared/api/shop'
import { approveTableEdition, getTableEdition, withdrawTableEdition } from '#shared/api/tableEdition'
import { deviceCookie } from '../auth/actors'
import { actorOf } from '../middleware/access'
import type { PersonActor } from '../services/actor'
import { devicesOf, enrolDevice, leaveDevice, revokeDeviceService } from '../services/devices'
import {
  changePersonService,
  colleaguesOf,
  createPersonService,
  disablePersonService,
  enablePersonService,
  peopleOf,
  setPassword,
} from '../services/people'
import { endSessions } from '../services/sessions'
import { changeShopService, createSiteService, renameSiteService, shopForOffice } from '../services/shops'
import {
  approveTableEditionService,
  tableEditionOf,
  withdrawTableEditionService,
} from '../services/tableEdition'
import { reviewTextService, textsOf, writeTextService } from '../services/texts'
import { answers, does, type Route } from './route'

/** Browsers forget a cookie after 400 days at most. */
const deviceCookieMs = 400 * 86_400_000

export const officeRoutes: Route[] = [
  answers(listPeople, async (deps, { shopId }) => ({ rows: await peopleOf(deps.db, shopId) })),
  answers(listColleagues, async (deps, { shopId }) => ({ rows: await colleaguesOf(deps.db, shopId) })),
  does(createPerson, createPersonService),
  does(changePerson, changePersonService, {
    afterwards: (deps, _actor, { personId }) => deps.dropSockets({ personId }),
  }),
  does(disablePerson, disablePersonService, {
    afterwards: (deps, _actor, { personId }) => endSessions(deps, personId),
  }),
  does(enablePerson, enablePersonService),
  {
    method: 'post',
    path: setPasswordPath,
    access: 'people.manage',
    schemas: { body: setPasswordBody },
    handle: (deps) => async (req, res) => {
      await setPassword(deps, actorOf<PersonActor>(req), setPasswordBody.parse(req.body), req.sessionID)
      res.status(204).end()
    },
  },
  answers(listDevices, async (deps, { shopId, deviceId }) => ({
    rows: await devicesOf(deps.db, shopId, deviceId),
  })),
  {
    method: 'post',
    path: enrolPath,
    access: 'devices.manage',
    schemas: { body: enrolBody, answer: enrolAnswer },
    handle: (deps) => async (req, res) => {
      const { deviceId, token } = await enrolDevice(
        deps,
        actorOf<PersonActor>(req),
        enrolBody.parse(req.body),
      )
      res.cookie(deviceCookie, token, {
        httpOnly: true,
        sameSite: 'lax',
        secure: deps.secure,
        maxAge: deviceCookieMs,
      })
      res.status(201).json({ deviceId })
    },
  },
  does(revokeDevice, revokeDeviceService, { afterwards: leaveDevice }),
  answers(getShop, (deps, { shopId }) => shopForOffice(deps.db, shopId)),
  does(changeShop, changeShopService),
  does(createSite, createSiteService),
  does(renameSite, renameSiteService),
  answers(listTexts, async (deps, { shopId }) => ({ rows: await textsOf(deps.db, shopId) })),
  does(writeText, writeTextService),
  does(reviewText, reviewTextService),
  answers(getTableEdition, (deps, { shopId }) => tableEditionOf(deps.db, shopId)),
  does(approveTableEdition, approveTableEditionService),
  does(withdrawTableEdition, withdrawTableEditionService),
]
