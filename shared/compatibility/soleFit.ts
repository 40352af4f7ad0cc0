/**
 * Sole types by their standard and mark. A sole that nobody could read is `unknown`.
 * Source of the list: boot-sole guides, ISO 23223:2025 and ISO 5355 scope pages.
 */
export const soleTypes = ['ISO 5355 A', 'ISO 5355 C', 'ISO 9523', 'ISO 23223', 'unknown'] as const
export type SoleType = (typeof soleTypes)[number]

/** A sole type that a binding's sheet can name. */
export type KnownSoleType = Exclude<SoleType, 'unknown'>
export const knownSoleTypes = soleTypes.filter((type): type is KnownSoleType => type !== 'unknown')

export type SoleFit = 'accepted' | 'refused' | 'unknown'

/**
 * Whether a binding takes a sole, by its sheet. A type on neither list, and a sole that nobody could read, is
 * unknown: a head technician decides. Refused is decided by nobody, also where a sheet says both.
 */
export function soleFit(
  soleType: SoleType,
  { accepts, refuses }: { accepts: readonly string[]; refuses: readonly string[] },
): SoleFit {
  if (soleType === 'unknown') return 'unknown'
  if (refuses.includes(soleType)) return 'refused'
  return accepts.includes(soleType) ? 'accepted' : 'unknown'
}
