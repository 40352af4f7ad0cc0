import { charFromKey, endsScan, isModifier, type Key } from './wedge'

/** One key going down. Times in ms on any clock that does not jump (the event's own time stamp). */
export type KeyStroke = Key & {
  atMs: number
  /** Control, alt or meta is held: a shortcut, a paste. */
  withShortcutKey?: boolean
  /** The key is held down and repeats. */
  repeat?: boolean
}

/** What may become a scan: the strokes since the last pause. */
export type ScanState = { readonly text: string; readonly startedAtMs: number; readonly lastAtMs: number }

export type Scan = { text: string; atMs: number }

export const noScan: ScanState = { text: '', startedAtMs: 0, lastAtMs: 0 }

/**
 * A scanner types much faster than a hand, without a pause, and ends with Enter or Tab. A hand may roll over two
 * or three keys as fast, never over four and Enter. Common practice, no source.
 */
export const scanTiming = { shortest: 4, longestGapMs: 60, meanGapMs: 30 } as const

function isFast({ text, startedAtMs }: ScanState, atMs: number, gaps: number): boolean {
  return text.length > 0 && atMs - startedAtMs <= gaps * scanTiming.meanGapMs
}

const continues = (state: ScanState, atMs: number) =>
  state.text !== '' && atMs >= state.lastAtMs && atMs - state.lastAtMs <= scanTiming.longestGapMs

/**
 * Takes one stroke; gives the state after it and the scan that it completed, or null. Hand typing, shortcuts,
 * pastes and held keys never complete one. Every scan is reported, whatever its text: parseLabel judges it.
 */
export function scanStep(state: ScanState, stroke: KeyStroke): { state: ScanState; scan: Scan | null } {
  const { atMs } = stroke
  if (stroke.withShortcutKey || stroke.repeat) return { state: noScan, scan: null }
  if (isModifier(stroke)) return { state, scan: null }
  if (endsScan(stroke)) {
    const { text } = state
    const isScan =
      text.length >= scanTiming.shortest && continues(state, atMs) && isFast(state, atMs, text.length)
    return { state: noScan, scan: isScan ? { text, atMs } : null }
  }
  const character = charFromKey(stroke)
  if (character === null) return { state: noScan, scan: null }
  if (!continues(state, atMs))
    return { state: { text: character, startedAtMs: atMs, lastAtMs: atMs }, scan: null }
  return {
    state: { text: state.text + character, startedAtMs: state.startedAtMs, lastAtMs: atMs },
    scan: null,
  }
}

/** Whether what is coming in is so fast that a field should no longer take it, though the code is not complete. */
export function looksLikeScan(state: ScanState): boolean {
  return state.text.length >= 3 && isFast(state, state.lastAtMs, state.text.length - 1)
}

/** Codes that were just seen, with the time of each in ms. */
export type RecentCodes = ReadonlyMap<string, number>

/** The same code within this time is "already scanned", not a second command. */
export const sameCodeMs = 2000

/**
 * Remembers that a code was seen and says whether it had been within the last two seconds. A label that stays in
 * front of the scanner stays "already scanned" until it was away for two seconds. Give the label's text.
 */
export function seeCode(
  recent: RecentCodes,
  text: string,
  atMs: number,
): { recent: RecentCodes; already: boolean } {
  const kept = new Map([...recent].filter(([, seenAtMs]) => atMs - seenAtMs < sameCodeMs))
  const already = kept.has(text)
  kept.set(text, atMs)
  return { recent: kept, already }
}
