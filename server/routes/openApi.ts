import { z, type ZodType } from 'zod'
import { problems } from '#shared/errors'
import { linkHeader } from '../auth/actors'
import { sessionCookie } from '../auth/session'
import type { Route } from './route'

type Json = Record<string, unknown>

const problem: Json = {
  description: 'Refused: problem details after RFC 9457 with a stable code.',
  content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
}

const problemSchema: Json = {
  type: 'object',
  required: ['type', 'title', 'status', 'code', 'params'],
  properties: {
    type: { type: 'string' },
    title: { type: 'string' },
    status: { type: 'integer' },
    code: { enum: Object.keys(problems) },
    params: { type: 'object' },
    issues: { type: 'array', items: { type: 'object' } },
  },
}

/** The OpenAPI 3.1 description of these routes, made from the very schemas that they parse and answer by. */
export function openApiOf(routes: readonly Route[]): Json {
  const paths: Record<string, Json> = {}
  for (const route of routes) {
    const path = route.path.replaceAll(/:(\w+)/g, '{$1}')
    paths[path] = { ...paths[path], [route.method]: operation(route) }
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Notchwise',
      version: '1',
      description:
        'Commands are POSTs of an envelope with an id that the client makes once per intent: the same id again has no second effect. Requests that change anything carry the Origin of a page of this server and the header x-notchwise: 1.',
    },
    paths,
    components: {
      schemas: { Problem: problemSchema },
      securitySchemes: {
        session: { type: 'apiKey', in: 'cookie', name: sessionCookie },
        link: { type: 'apiKey', in: 'header', name: linkHeader },
      },
    },
  }
}

function operation({ method, path, access, schemas }: Route): Json {
  const { params, query, body, answer } = schemas
  return {
    operationId: `${method} ${path}`,
    'x-access': access,
    security: access === 'open' ? [] : [access === 'link' ? { link: [] } : { session: [] }],
    parameters: [...parameters('path', params), ...parameters('query', query)],
    ...(body
      ? {
          requestBody: { required: true, content: { 'application/json': { schema: asJson(body, 'input') } } },
        }
      : {}),
    responses: {
      [successOf(method, answer)]: answer
        ? { description: 'Done', content: { 'application/json': { schema: asJson(answer, 'output') } } }
        : { description: 'Done' },
      default: problem,
    },
  }
}

function successOf(method: Route['method'], answer: ZodType | undefined): string {
  if (method === 'get') return '200'
  return answer ? '201' : '204'
}

function parameters(where: 'path' | 'query', schema: ZodType | undefined): Json[] {
  if (!schema) return []
  const { properties = {}, required = [] } = asJson(schema, 'input') as {
    properties?: Record<string, Json>
    required?: string[]
  }
  return Object.entries(properties).map(([name, shape]) => ({
    name,
    in: where,
    required: where === 'path' || required.includes(name),
    schema: shape,
  }))
}

/** What JSON Schema cannot say (a trimmed string, say) is left out; the server still holds to it. */
function asJson(schema: ZodType, io: 'input' | 'output'): Json {
  const { $schema: _dialect, ...rest } = z.toJSONSchema(schema, { io, unrepresentable: 'any' }) as Json
  return rest
}

/** Serves the description; it names routes and shapes and nobody's data. */
export function openApiRoute(described: readonly Route[]): Route {
  let document: Json | undefined
  const route: Route = {
    method: 'get',
    path: '/api/openapi.json',
    access: 'open',
    schemas: {},
    handle: () => (_req, res) => {
      document ??= openApiOf([...described, route])
      res.json(document)
    },
  }
  return route
}
