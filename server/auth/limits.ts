import { rateLimit, type RateLimitRequestHandler } from 'express-rate-limit'
import type { Request } from 'express'
import { problemDetails } from '../middleware/problems'

const minutes = 60_000

function accountOf(req: Request): string {
  const body: unknown = req.body
  const email = typeof body === 'object' && body !== null && 'email' in body ? body.email : ''
  return String(email).trim().toLowerCase().slice(0, 200)
}

function limit(
  name: string,
  tries: number,
  key: (req: Request) => string,
  { counts = (status: number) => status >= 400 } = {},
): RateLimitRequestHandler {
  return rateLimit({
    windowMs: 15 * minutes,
    limit: tries,
    identifier: name,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    skipSuccessfulRequests: true,
    requestWasSuccessful: (_req, res) => !counts(res.statusCode),
    keyGenerator: key,
    validate: { keyGeneratorIpFallback: false },
    handler: (_req, res) => {
      res.status(429).type('application/problem+json').json(problemDetails('request.too_many'))
    },
  })
}

/**
 * Failed sign-ins: ten a quarter of an hour for one account from one address, as the connection shows it, whatever
 * a header claims. A guesser at another address cannot lock the owner out.
 */
export const signInLimit = () =>
  limit('sign-in', 10, (req) => `${accountOf(req)} ${req.socket.remoteAddress ?? ''}`)

/** Failed tries of a signed-in person's own password: ten a quarter of an hour, so that a stolen session gains nothing. */
export const guessLimit = (name: string) =>
  limit(name, 10, (req) => (req.actor?.kind === 'person' ? req.actor.personId : ''))

/** Failed tries of links and set-up codes: thirty a quarter of an hour from one address. */
export const secretLimit = () => limit('secret', 30, (req) => req.socket.remoteAddress ?? '')

/**
 * Forms begun at one door's code: more than a crowd does, less than a prank. Phones on the shop's own network share
 * an address, so the code counts and not who asks.
 */
export const doorLimit = () =>
  limit('door', 300, (req) => String((req.body as { door?: unknown } | undefined)?.door).slice(0, 64), {
    counts: () => true,
  })

/**
 * Links that nobody gave out: sixty a quarter of an hour from one address. What a real link is refused for another
 * reason does not count, since a shop's guests share an address.
 */
export const linkLimit = () =>
  limit('link', 60, (req) => req.socket.remoteAddress ?? '', { counts: (status) => status === 404 })
