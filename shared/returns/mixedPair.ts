import { sidedCode } from '#shared/labels/labels'

/** A ski or boot as it was scanned in, and which sides of its pair are still with a renter after that. */
export interface ScannedIn {
  itemKind: 'ski_pair' | 'boots'
  code: string
  side: 'left' | 'right'
  missing: readonly ('left' | 'right')[]
}

export interface MixedPair {
  /** The two that were scanned one after the other: 'S121L', 'S077R'. */
  scanned: [string, string]
  /** The mate of each: 'S121R', 'S077L'. */
  mates: [string, string]
}

const other = { left: 'right', right: 'left' } as const

/**
 * Whether two skis (or two boots) scanned one after the other belong to two pairs: the first one's mate has not
 * come, and then something of another pair did. Neither return is wrong; the two have to be parted.
 */
export function mixedPair(before: ScannedIn | null, now: ScannedIn): MixedPair | null {
  if (!before || before.itemKind !== now.itemKind || before.code === now.code) return null
  if (!before.missing.includes(other[before.side])) return null
  return {
    scanned: [sidedCode(before.code, before.side), sidedCode(now.code, now.side)],
    mates: [sidedCode(before.code, other[before.side]), sidedCode(now.code, other[now.side])],
  }
}
