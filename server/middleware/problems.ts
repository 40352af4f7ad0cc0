import type { ErrorRequestHandler, RequestHandler } from 'express'
import { ZodError } from 'zod'
import { problems, type ProblemCode, type ProblemDetails, type ProblemParams } from '#shared/errors'
import type { Deps } from '../deps'
import { databaseIsAway, Problem } from '../errors'

/** Problem details after RFC 9457 for a code. */
export function problemDetails(
  code: ProblemCode,
  params: ProblemParams = {},
  issues?: ProblemDetails['issues'],
): ProblemDetails {
  return {
    type: 'about:blank',
    title: code,
    status: problems[code],
    code,
    params,
    ...(issues ? { issues } : {}),
  }
}

/** Anything under /api that no route took. */
export const unknownRoute: RequestHandler = () => {
  throw new Problem('request.not_found')
}

/** Turns whatever was thrown into problem details; only what nobody foresaw is logged as an error. */
export function answerProblems(deps: Pick<Deps, 'log'>): ErrorRequestHandler {
  return (error: unknown, _req, res, next) => {
    if (res.headersSent) return next(error)
    const details = detailsOf(error)
    if (details.status >= 500) deps.log.error({ err: error }, details.code)
    res.status(details.status).type('application/problem+json').json(details)
  }
}

function detailsOf(error: unknown): ProblemDetails {
  if (error instanceof Problem) return problemDetails(error.code, error.params)
  if (error instanceof ZodError) {
    const issues = error.issues.map((issue) => ({
      path: issue.path.map((part) => (typeof part === 'symbol' ? String(part) : part)),
      reason: issue.code ?? 'custom',
    }))
    return problemDetails('request.malformed', {}, issues)
  }
  if (databaseIsAway(error)) return problemDetails('server.database_away')
  const status = typeof error === 'object' && error !== null && 'status' in error ? Number(error.status) : 500
  if (status === 413) return problemDetails('request.too_large')
  if (status >= 400 && status < 500) return problemDetails('request.malformed')
  return problemDetails('server.fault')
}
