import http from 'node:http'
import { randomUUID } from 'node:crypto'
import type { Command } from '#shared/api/define'
import type { ProblemCode, ProblemParams } from '#shared/errors'

export interface BrowserAnswer {
  status: number
  headers: http.IncomingHttpHeaders
  body: Record<string, unknown>
  code: ProblemCode | undefined
  params: ProblemParams
}

/** A browser with a cookie jar at a real server; headers can be left out or forged, its address chosen. */
export class Browser {
  readonly cookies = new Map<string, string>()

  constructor(
    private readonly url: string,
    /** The address on this machine that requests come from: 127.0.0.1, 127.0.0.2 ... */
    private readonly from = '127.0.0.1',
  ) {}

  get(path: string) {
    return this.ask('GET', path)
  }

  send(
    method: 'POST' | 'PUT' | 'DELETE',
    path: string,
    body?: unknown,
    headers: http.OutgoingHttpHeaders = {},
  ) {
    return this.ask(method, path, body === undefined ? undefined : JSON.stringify(body), {
      ...(body === undefined ? {} : { 'content-type': 'application/json' }),
      ...headers,
    })
  }

  /** A command in a fresh envelope. */
  command<Body>(
    command: Pick<Command<string, Body>, 'kind' | 'path'>,
    body: NoInfer<Body>,
    headers: http.OutgoingHttpHeaders = {},
  ) {
    const occurredAt = new Date().toISOString()
    const envelope = { id: randomUUID(), occurredAt, seenSeq: null, kind: command.kind, body }
    return this.send('POST', command.path, envelope, headers)
  }

  /** A request as it stands; a header that is given as undefined is left out. */
  ask(
    method: string,
    path: string,
    body?: string,
    headers: http.OutgoingHttpHeaders = {},
  ): Promise<BrowserAnswer> {
    const own = { origin: this.url, 'x-notchwise': '1', cookie: this.cookieHeader(), ...headers }
    const given = Object.entries(own).filter(([, value]) => value !== undefined && value !== '')
    return new Promise((done, failed) => {
      const request = http.request(
        this.url + path,
        { method, headers: Object.fromEntries(given), localAddress: this.from },
        (response) => {
          let text = ''
          response.setEncoding('utf8')
          response.on('data', (part: string) => (text += part))
          response.on('end', () => {
            this.keep(response.headers['set-cookie'] ?? [])
            const parsed = (parse(text) ?? {}) as Record<string, unknown>
            done({
              status: response.statusCode ?? 0,
              headers: response.headers,
              body: parsed,
              code: parsed.code as ProblemCode | undefined,
              params: (parsed.params ?? {}) as ProblemParams,
            })
          })
        },
      )
      request.on('error', failed)
      request.end(body)
    })
  }

  private cookieHeader() {
    return [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
  }

  private keep(cookies: string[]) {
    for (const cookie of cookies) {
      const [name, value] = cookie.split(';')[0]!.split('=', 2) as [string, string]
      if (value === '' || /expires=Thu, 01 Jan 1970/i.test(cookie)) this.cookies.delete(name)
      else this.cookies.set(name, value)
    }
  }
}

function parse(text: string): unknown {
  try {
    return JSON.parse(text)
  } catch {
    return null
  }
}
