import type { SkierType } from '#shared/release/rules'

/** Keys of the sentences, without the signs that a key cannot have. */
export const skierTypeKey: Record<SkierType, string> = {
  'I-': 'oneLess',
  I: 'one',
  II: 'two',
  III: 'three',
  'III+': 'threeMore',
}
