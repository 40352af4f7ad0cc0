import { pino, type Logger } from 'pino'

/** The server's log: JSON lines on standard error; cookies, PINs, passwords and tokens never enter it. */
export function createLog(level: string): Logger {
  return pino(
    {
      level,
      redact: {
        paths: ['*.password', '*.pin', '*.token', 'req.headers', 'headers.cookie', 'err.params', 'err.query'],
        remove: true,
      },
    },
    pino.destination(2),
  )
}
