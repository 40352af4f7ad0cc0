import type { CallBackRow } from '#shared/api/callBacks'
import { request } from './http'

export const fetchCallBacks = (state: 'open' | 'closed') =>
  request<{ rows: CallBackRow[] }>('GET', '/api/call-backs', { query: { state } })
