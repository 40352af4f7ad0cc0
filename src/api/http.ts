import type { ProblemCode, ProblemDetails, ProblemParams } from '#shared/errors'

/** What can go wrong before an answer exists, beside the server's own codes. */
export type ClientProblemCode = ProblemCode | 'network.unreachable' | 'network.slow'

/** A refusal of the server, or the lack of an answer (status 0). Screens word it by its code. */
export class ApiProblem extends Error {
  constructor(
    readonly status: number,
    readonly code: ClientProblemCode,
    readonly params: ProblemParams = {},
    readonly issues: NonNullable<ProblemDetails['issues']> = [],
  ) {
    super(code)
  }
}

const patienceMs = 15_000
let onSignedOut: () => void = () => undefined

/** Called when the server no longer knows who this is; the screen keeps its form and asks to sign in again. */
export function whenSignedOut(handler: () => void) {
  onSignedOut = handler
}

/** One request of JSON. Throws `ApiProblem`; an empty answer is null. */
export async function request<Answer>(
  method: 'GET' | 'POST' | 'PUT' | 'DELETE',
  path: string,
  { body, headers = {}, query }: { body?: unknown; headers?: Record<string, string>; query?: Query } = {},
): Promise<Answer> {
  let response: Response
  try {
    response = await fetch(path + search(query), {
      method,
      credentials: 'same-origin',
      headers: {
        accept: 'application/json',
        'x-notchwise': '1',
        ...(body === undefined ? {} : { 'content-type': 'application/json' }),
        ...headers,
      },
      body: body === undefined ? undefined : JSON.stringify(body),
      signal: AbortSignal.timeout(patienceMs),
    })
  } catch (error) {
    const slow = error instanceof DOMException && error.name === 'TimeoutError'
    throw new ApiProblem(0, slow ? 'network.slow' : 'network.unreachable')
  }
  if (response.status === 204) return null as Answer
  const answer: unknown = await response.json().catch(() => null)
  if (response.ok) return answer as Answer
  const { code, params, issues } = (answer ?? {}) as Partial<ProblemDetails>
  if (response.status === 401 && code === 'session.missing') onSignedOut()
  throw new ApiProblem(response.status, code ?? 'server.fault', params, issues)
}

export type Query = Record<string, string | number | boolean | null | undefined>

function search(query: Query = {}): string {
  const given = Object.entries(query).filter(
    ([, value]) => value !== null && value !== undefined && value !== '',
  )
  return given.length === 0
    ? ''
    : `?${new URLSearchParams(given.map(([key, value]) => [key, String(value)]))}`
}
