import { z, type ZodType } from 'zod'

/** What of JSON Schema our own schemas use. */
interface Shape {
  type?: string | string[]
  const?: unknown
  enum?: unknown[]
  format?: string
  pattern?: string
  minLength?: number
  maxLength?: number
  minimum?: number
  minItems?: number
  properties?: Record<string, Shape>
  items?: Shape
  prefixItems?: Shape[]
  anyOf?: Shape[]
  oneOf?: Shape[]
  allOf?: Shape[]
}

/** Texts that a pattern asks for; the first that fits is taken. */
const texts = [
  'Something said',
  '104417',
  'a'.repeat(24),
  'f'.repeat(64),
  'data:image/png;base64,iVBORw0KGgo=',
  '12:30',
  'S4171',
  'B2881',
]

/**
 * A body, params or query that a schema takes, every optional part filled in. `idAt` gives the ids by the dotted
 * path of their field.
 */
export function sampleOf(schema: ZodType, idAt: (path: string) => string): unknown {
  return sample(shapeOf(schema), '', idAt)
}

/** The dotted paths at which a schema takes ids, each once. */
export function idPathsOf(schema: ZodType): string[] {
  const paths = new Set<string>()
  sample(shapeOf(schema), '', (path) => {
    paths.add(path)
    return '00000000-0000-4000-8000-000000000000'
  })
  return [...paths]
}

const shapeOf = (schema: ZodType) => z.toJSONSchema(schema, { io: 'input', unrepresentable: 'any' }) as Shape

function sample(shape: Shape, path: string, idAt: (path: string) => string): unknown {
  if (shape.const !== undefined) return shape.const
  if (shape.enum) return shape.enum[0]
  const choices = shape.anyOf ?? shape.oneOf ?? shape.allOf
  if (choices) return sample(choices.find(({ type }) => type !== 'null') ?? choices[0]!, path, idAt)
  const type = Array.isArray(shape.type) ? shape.type.find((one) => one !== 'null') : shape.type
  if (type === 'object') {
    const entries = Object.entries(shape.properties ?? {})
    return Object.fromEntries(
      entries.map(([key, value]) => [key, sample(value, path ? `${path}.${key}` : key, idAt)]),
    )
  }
  if (type === 'array') {
    if (shape.prefixItems) return shape.prefixItems.map((item, at) => sample(item, `${path}.${at}`, idAt))
    return Array.from({ length: shape.minItems ?? 1 }, () => sample(shape.items ?? {}, path, idAt))
  }
  if (type === 'boolean') return true
  if (type === 'integer' || type === 'number') return Math.max(shape.minimum ?? 1, 1)
  return type === 'string' ? text(shape, path, idAt) : null
}

function text(
  { format, pattern, minLength = 0, maxLength = 4000 }: Shape,
  path: string,
  idAt: (path: string) => string,
): string {
  if (format === 'uuid') return idAt(path)
  if (format === 'date') return '2031-01-15'
  if (format === 'date-time') return '2031-01-15T09:00:00.000Z'
  if (format === 'email') return 'somebody@shop.test'
  const fits = pattern
    ? texts.find((one) => new RegExp(pattern, 'u').test(one) && one.length >= minLength)
    : undefined
  return (fits ?? 'Something said'.padEnd(minLength, '.')).slice(0, maxLength)
}
