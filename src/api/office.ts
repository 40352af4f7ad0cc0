import type { AnswerOf } from '#shared/api/define'
import type { listDevices, Station } from '#shared/api/devices'
import type { listPeople } from '#shared/api/people'
import type { DemoAnswer, SessionAnswer, StationAnswer } from '#shared/api/session'
import type { getShop, listTexts } from '#shared/api/shop'
import type { getTableEdition } from '#shared/api/tableEdition'
import { request } from './http'

export type People = AnswerOf<typeof listPeople>
export type Devices = AnswerOf<typeof listDevices>
export type Shop = AnswerOf<typeof getShop>
export type Texts = AnswerOf<typeof listTexts>
export type TableEdition = AnswerOf<typeof getTableEdition>

export const fetchPeople = () => request<People>('GET', '/api/people')
export const fetchDevices = () => request<Devices>('GET', '/api/devices')
export const fetchShop = () => request<Shop>('GET', '/api/shop')
export const fetchTexts = () => request<Texts>('GET', '/api/texts')
export const fetchTableEdition = () => request<TableEdition>('GET', '/api/table-edition')

/** What this browser is, before anybody signs in. */
export const fetchStation = () => request<StationAnswer>('GET', '/api/station')
export const fetchDemo = () => request<DemoAnswer>('GET', '/api/session/demo')
export const fetchSetup = () => request<{ open: boolean }>('GET', '/api/setup')

export const goOnAs = (personId: string, pin: string) =>
  request<SessionAnswer>('POST', '/api/session/switch', { body: { personId, pin } })
export const setUp = (body: object) => request<SessionAnswer>('POST', '/api/setup', { body })
export const setPassword = (personId: string, password: string) =>
  request<null>('POST', '/api/people/password', { body: { personId, password } })
export const setOwnPin = (password: string, pin: string) =>
  request<null>('POST', '/api/session/pin', { body: { password, pin } })
export const setOwnPassword = (password: string, newPassword: string) =>
  request<null>('POST', '/api/session/password', { body: { password, newPassword } })
export const enrolHere = (body: { name: string; station: Station; siteId: string }) =>
  request<{ deviceId: string }>('POST', '/api/devices', { body })
