import type { RequestHandler } from 'express'
import { Problem } from '../errors'

const safe = new Set(['GET', 'HEAD', 'OPTIONS'])

/**
 * A request that changes something must come from a page of ours: its Origin is this host or a listed one, it says
 * so in a header that no form can send, and its body is JSON. Absent and near-miss origins are refused.
 */
export function requireOwnOrigin(origins: string[]): RequestHandler {
  return (req, _res, next) => {
    if (safe.has(req.method)) return next()
    if (!originAllowed(req.headers.origin, req.headers.host, origins)) throw new Problem('request.origin')
    if (req.headers['x-notchwise'] !== '1') throw new Problem('request.origin')
    const hasBody =
      Number(req.headers['content-length'] ?? 0) > 0 || req.headers['transfer-encoding'] !== undefined
    if (hasBody && !req.is('application/json')) throw new Problem('request.malformed')
    next()
  }
}

/** Whether a page of this origin may change anything on this host; for sockets too. */
export function originAllowed(
  origin: string | undefined,
  host: string | undefined,
  origins: string[],
): boolean {
  if (!origin || !host) return false
  return origin === `http://${host}` || origin === `https://${host}` || origins.includes(origin)
}
