import type { z } from 'zod'

/** An input that is not well formed: where, and what is wrong there. */
export type InvalidInput = {
  ok: false
  reason: 'invalid_input'
  path: (string | number)[]
  message: string
}

export function invalidInput(path: (string | number)[], message: string): InvalidInput {
  return { ok: false, reason: 'invalid_input', path, message }
}

/** The first problem of a schema's error; an unknown key is named at the end of the path. */
export function invalidInputOf(error: z.ZodError): InvalidInput {
  const [issue] = error.issues
  if (!issue) return invalidInput([], 'not well formed')
  const path = issue.path.map((part) => (typeof part === 'number' ? part : String(part)))
  if (issue.code === 'unrecognized_keys')
    return invalidInput([...path, ...issue.keys.slice(0, 1)], 'unknown key')
  return invalidInput(path, plainWords(issue.message))
}

/** The schema library's own sentence without its verdict in front: 'expected number, received null'. */
function plainWords(message: string): string {
  const words = message.replace(/^Invalid [a-z ]+[:.] /, '')
  return words.charAt(0).toLowerCase() + words.slice(1)
}
