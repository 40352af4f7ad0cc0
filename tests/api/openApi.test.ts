import { beforeAll, describe, expect, test } from 'vitest'
import { problems } from '#shared/errors'
import { passportFor } from '../../server/auth/passport'
import { routes } from '../../server/routes/routes'
import { testApp, type TestApp } from '../support/app'

interface Operation {
  'x-access': string
  parameters: { name: string; in: string; required: boolean; schema: object }[]
  requestBody?: { content: Record<string, { schema: { properties?: Record<string, { const?: string }> } }> }
  responses: Record<string, { content?: Record<string, { schema: object }> }>
}
interface Description {
  openapi: string
  paths: Record<string, Record<string, Operation>>
  components: { schemas: { Problem: { properties: { code: { enum: string[] } } } } }
}

let app: TestApp
let description: Description
const all = routes(passportFor({ db: {} as never }))

beforeAll(async () => {
  app = await testApp()
  description = (await app.stranger().get('/api/openapi.json')).body as Description
})

describe('the description of the API', () => {
  test('is OpenAPI 3.1 and has every route, no more', () => {
    expect(description.openapi).toBe('3.1.0')
    const described = Object.entries(description.paths).flatMap(([path, operations]) =>
      Object.keys(operations).map((method) => `${method} ${path}`),
    )
    expect(described.sort()).toEqual(
      all.map(({ method, path }) => `${method} ${path.replaceAll(/:(\w+)/g, '{$1}')}`).sort(),
    )
  })

  test('says of every route who may call it and what a refusal looks like', () => {
    for (const operation of Object.values(description.paths).flatMap((path) => Object.values(path))) {
      expect(operation['x-access']).toMatch(/^[a-z_]+(\.[a-z]+)?$/i)
      expect(operation.responses.default?.content).toHaveProperty(['application/problem+json'])
    }
    expect(description.components.schemas.Problem.properties.code.enum).toEqual(Object.keys(problems))
  })

  test('names every part of an address as a required parameter', () => {
    for (const [path, operations] of Object.entries(description.paths)) {
      const parts = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name)
      for (const { parameters } of Object.values(operations)) {
        const named = parameters.filter((one) => one.in === 'path')
        expect([path, named.map(({ name }) => name).sort()]).toEqual([path, parts.sort()])
        expect(named.every(({ required }) => required)).toBe(true)
      }
    }
  })

  test('a command is an envelope of its kind', () => {
    const body =
      description.paths['/api/people/disable']!.post!.requestBody!.content['application/json']!.schema
    expect(Object.keys(body.properties!)).toEqual(['id', 'occurredAt', 'seenSeq', 'kind', 'body'])
    expect(body.properties!.kind!.const).toBe('people.disable')
  })

  test('nothing in it points to a place that is not there', () => {
    const text = JSON.stringify(description)
    for (const [, ref] of text.matchAll(/"\$ref":"#\/([^"]+)"/g)) {
      const found = ref!
        .split('/')
        .reduce<unknown>((at, key) => (at as Record<string, unknown>)?.[key], description)
      expect([ref, found === undefined]).toEqual([ref, false])
    }
  })
})
