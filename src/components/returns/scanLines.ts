import type { ScannedToday } from '#shared/api/returns'

/** One item as it came in: its scans of one rental drawn together. */
export interface ScanLine {
  key: string
  itemKind: ScannedToday['itemKind']
  itemId: string
  code: string | null
  sides: ScannedToday['side'][]
  state: ScannedToday['state']
  missing: ScannedToday['missing']
  rentalNumber: number | null
  renter: string | null
  at: string
  soleLengthReadMm: number | null
  differs: boolean
}

/** The day's scans, newest first, with left and right of an item in one line at the place of the newer scan. */
export function scanLines(scans: readonly ScannedToday[]): ScanLine[] {
  const lines = new Map<string, ScanLine>()
  for (const scan of scans) {
    const key = `${scan.itemId} ${scan.rentalId ?? scan.id}`
    const known = lines.get(key)
    if (known) {
      if (!known.sides.includes(scan.side)) known.sides.push(scan.side)
      continue
    }
    const { soleLengthReadMm, fittedSoleLengthMm, ...rest } = scan
    lines.set(key, {
      ...rest,
      key,
      sides: [scan.side],
      soleLengthReadMm,
      differs: soleLengthReadMm !== null && soleLengthReadMm !== fittedSoleLengthMm,
    })
  }
  for (const line of lines.values()) line.sides.sort()
  return [...lines.values()]
}
