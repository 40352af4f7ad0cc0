import { problems, type ProblemCode, type ProblemParams } from '#shared/errors'

/** A refusal with a stable code: thrown by services, turned into problem details by the error handler. */
export class Problem extends Error {
  readonly code: ProblemCode
  readonly status: number
  readonly params: ProblemParams

  constructor(code: ProblemCode, params: ProblemParams = {}) {
    super(code)
    this.code = code
    this.status = problems[code]
    this.params = params
  }
}

/** What PostgreSQL said, from an error that Drizzle may have wrapped. */
export function databaseError(
  error: unknown,
): { code: string; constraint?: string; detail?: string; message: string } | null {
  for (let e: unknown = error; e instanceof Error; e = e.cause) {
    if ('code' in e && typeof e.code === 'string' && /^[0-9A-Z]{5}$/.test(e.code)) {
      const { code, message } = e
      const constraint = 'constraint' in e && typeof e.constraint === 'string' ? e.constraint : undefined
      const detail = 'detail' in e && typeof e.detail === 'string' ? e.detail : undefined
      return { code, message, constraint, detail }
    }
  }
  return null
}

/** Whether the database refused because this unique index already holds such a row. */
export function isDuplicate(error: unknown, constraint: string): boolean {
  const found = databaseError(error)
  return found?.code === '23505' && found.constraint === constraint
}

/** Whether the database cannot be reached or is starting up: the caller may try again. */
export function databaseIsAway(error: unknown): boolean {
  const found = databaseError(error)
  if (found) return /^(08|57P0|53)/.test(found.code)
  for (let e: unknown = error; e instanceof Error; e = e.cause) {
    if (
      'code' in e &&
      typeof e.code === 'string' &&
      ['ECONNREFUSED', 'ECONNRESET', 'EPIPE', 'ETIMEDOUT'].includes(e.code)
    )
      return true
    if (/Connection terminated|timeout exceeded when trying to connect/.test(e.message)) return true
  }
  return false
}
