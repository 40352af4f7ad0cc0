import { pino, type DestinationStream, type Logger } from 'pino'

/**
 * The server's log: JSON lines, on standard error unless said otherwise. Cookies, PINs, passwords, tokens and
 * people's data never enter it.
 */
export function createLog(level: string, destination: DestinationStream = pino.destination(2)): Logger {
  return pino(
    {
      level,
      serializers: { err: errorForLog },
      redact: { paths: ['*.password', '*.pin', '*.token', 'req.headers', 'headers.cookie'], remove: true },
    },
    destination,
  )
}

interface LoggedError {
  type: string
  message: string
  code?: string
  constraint?: string
  stack?: string
  cause?: LoggedError
}

/**
 * An error as the log may keep it. The database and its driver quote what was sent in message and detail, which may
 * be anybody's name: of theirs only the code, the constraint and the statement without its values are kept.
 */
export function errorForLog(error: unknown): LoggedError {
  if (!(error instanceof Error)) return { type: typeof error, message: '' }
  const { name, cause } = error
  const { code, constraint, query } = error as { code?: unknown; constraint?: unknown; query?: unknown }
  const fromDatabase = typeof query === 'string' || (typeof code === 'string' && /^[0-9A-Z]{5}$/.test(code))
  return {
    type: name,
    message: fromDatabase ? (typeof query === 'string' ? query : 'refused by the database') : error.message,
    ...(typeof code === 'string' ? { code } : {}),
    ...(typeof constraint === 'string' ? { constraint } : {}),
    stack: error.stack
      ?.split('\n')
      .filter((line) => line.startsWith('    at '))
      .join('\n'),
    ...(cause ? { cause: errorForLog(cause) } : {}),
  }
}
