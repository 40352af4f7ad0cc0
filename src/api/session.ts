import type { SessionAnswer } from '#shared/api/session'
import { request } from './http'

/** Who is signed in on this browser; nobody: null. */
export function fetchSession(): Promise<SessionAnswer | null> {
  return request('GET', '/api/session')
}

export function startSession(email: string, password: string): Promise<SessionAnswer> {
  return request('POST', '/api/session', { body: { email, password } })
}

export function endSession(): Promise<null> {
  return request('DELETE', '/api/session')
}
