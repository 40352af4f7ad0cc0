import type { PresetLine } from '#shared/schemas/items'
import type { TrackModel } from '#shared/track/trackModel'
import { solesByPosition, type SoleRange } from '#shared/track/solesByPosition'

interface Mounted {
  track: TrackModel
  contentSha256: string
  offsetMm: number
}

const kept = 64
const known = new Map<string, ReadonlyMap<string, SoleRange>>()

/** The ranges of one sheet on skis of one offset; a plan per sole length is some work, so the last sheets are kept. */
function rangesOf({ track, contentSha256, offsetMm }: Mounted): ReadonlyMap<string, SoleRange> {
  const key = `${contentSha256} ${offsetMm}`
  const before = known.get(key)
  if (before) return before
  const oldest = known.keys().next()
  if (known.size >= kept && !oldest.done) known.delete(oldest.value)
  const made = solesByPosition(track, offsetMm)
  known.set(key, made)
  return made
}

/** Sole lengths for which both skis stand right as they are; null where unknown, where they differ, or for none. */
export function fitsSoles(mounted: Mounted, presets: PresetLine[]): SoleRange | null {
  const [left, right] = presets
  if (!left || !right || left.toe === null || left.heel === null) return null
  if (left.toe !== right.toe || left.heel !== right.heel) return null
  return rangesOf(mounted).get(`${left.toe} ${left.heel}`) ?? null
}
