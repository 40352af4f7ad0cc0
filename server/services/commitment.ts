import { createHash } from 'node:crypto'
import type { Height, Mass } from '#shared/units/bodySchemas'

/** What a fitting is computed from, of the renter's own. */
export interface CommittedInputs {
  mass: Mass
  height: Height
  age: number
  skierType: string
  request: number
}

/**
 * Hex SHA-256 over salt and canonical inputs (JSON, keys in alphabetical order): a record keeps this and no body
 * data. With salt and inputs it can be proved later; once they are erased it tells nothing.
 */
export function inputsCommitment(
  salt: Buffer,
  { mass, height, age, skierType, request }: CommittedInputs,
): string {
  const canonical = JSON.stringify(sorted({ mass, height, age, skierType, request }))
  return createHash('sha256').update(salt).update(canonical, 'utf8').digest('hex')
}

function sorted(value: unknown): unknown {
  if (typeof value !== 'object' || value === null) return value
  return Object.fromEntries(
    Object.entries(value)
      .sort(([a], [b]) => (a < b ? -1 : 1))
      .map(([key, inner]) => [key, sorted(inner)]),
  )
}
