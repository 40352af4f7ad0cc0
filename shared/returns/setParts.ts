import { sidedCode } from '#shared/labels/labels'

/** One thing of a set: a ski, a boot, or the renter's own boots, which have no label (code null). */
export interface SetPart {
  itemKind: 'ski_pair' | 'boots' | 'own_boots'
  itemId: string
  code: string | null
  side: 'left' | 'right' | 'both'
  back: boolean
}

const order = { ski_pair: 0, boots: 1, own_boots: 2 } as const

/** What people call a part: 'S512R'; own boots have no code. */
export function partCode({ code, side }: Pick<SetPart, 'code' | 'side'>): string | null {
  return code === null ? null : sidedCode(code, side === 'both' ? null : side)
}

/**
 * What of a set is still to come, in the order in which hands reach for it: the other side of what was just
 * scanned, then skis, then boots, then the renter's own boots to be read.
 */
export function stillToScan(parts: readonly SetPart[], justScannedId: string | null): SetPart[] {
  const rank = (part: SetPart) =>
    (part.itemId === justScannedId ? 0 : 10) + order[part.itemKind] * 2 + (part.side === 'right' ? 1 : 0)
  return parts.filter((part) => !part.back).sort((a, b) => rank(a) - rank(b))
}

/** What is still to come, a whole pair of skis or boots said once: 'S512R', then 'B340'. */
export function stillToScanCodes(parts: readonly SetPart[], justScannedId: string | null): string[] {
  const open = stillToScan(parts, justScannedId)
  const codes = open.map((part) => {
    const bothOpen = open.filter(({ itemId }) => itemId === part.itemId).length === 2
    return bothOpen ? part.code : partCode(part)
  })
  return [...new Set(codes)].filter((code) => code !== null)
}
