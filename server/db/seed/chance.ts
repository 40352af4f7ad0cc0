/** Repeatable chance for invented data: the same seed gives the same shop. */
export interface Chance {
  /** In [0, 1). */
  next: () => number
  /** Whole number from `from` to `to`, both included. */
  int: (from: number, to: number) => number
  pick: <T>(from: readonly T[]) => T
  happens: (share: number) => boolean
  uuid: () => string
  bytes: (count: number) => Buffer
}

/** A small mixing generator (mulberry32); good enough for invented people, for nothing else. */
export function chanceFrom(seed: number): Chance {
  let state = seed >>> 0
  const next = () => {
    state = (state + 0x6d2b79f5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), state | 1)
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296
  }
  const int = (from: number, to: number) => from + Math.floor(next() * (to - from + 1))
  const bytes = (count: number) => Buffer.from(Array.from({ length: count }, () => int(0, 255)))
  return {
    next,
    int,
    bytes,
    pick: (from) => from[int(0, from.length - 1)]!,
    happens: (share) => next() < share,
    uuid: () => {
      const raw = bytes(16)
      raw[6] = (raw[6]! & 0x0f) | 0x40
      raw[8] = (raw[8]! & 0x3f) | 0x80
      const hex = raw.toString('hex')
      return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join(
        '-',
      )
    },
  }
}
