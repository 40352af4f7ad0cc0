import { checkCharacter, checksOut } from './checkCharacter'

export type LabelKind = 'ski' | 'boot'
export type LabelSide = 'left' | 'right'

/** What a code names: a ski pair or boots (side null), or one ski or boot of it. */
export type LabelCode = { kind: LabelKind; code: string; side: LabelSide | null }

export type ParsedLabel =
  | (LabelCode & { ok: true; text: string })
  /** check_character: misread or mistyped. not_ours: another shop's or maker's code. unfinished: cut short. */
  | { ok: false; reason: 'check_character' | 'not_ours' | 'unfinished' }

const shape = /^([SB][1-9]\d{0,5})([LR]?)$/
const kinds: Record<string, LabelKind> = { S: 'ski', B: 'boot' }
const sides: Record<string, LabelSide> = { L: 'left', R: 'right' }
const letters = { left: 'L', right: 'R' } as const

/** Capitals, without the spaces and hyphens that people put between groups. */
const tidy = (text: string) => text.replace(/[\s-]/g, '').toUpperCase()

function readCode(text: string): LabelCode | null {
  const [, code = '', side = ''] = shape.exec(text) ?? []
  const kind = kinds[code.charAt(0)]
  return kind ? { kind, code, side: sides[side] ?? null } : null
}

/** The code of a pair ('S417', 'B288') with its side: 'S417L'. */
export function sidedCode(code: string, side: LabelSide | null): string {
  return side ? code + letters[side] : code
}

/** The text of a label: code, side and check character. For a code that is not ours a RangeError. */
export function labelFor(code: string, side: LabelSide | null): string {
  const sided = sidedCode(code, side)
  const check = readCode(sided) ? checkCharacter(sided) : null
  if (check === null) throw new RangeError(`${code} is no code of ours`)
  return sided + check
}

/** How many labels one ski or boot can have in its life: the first, and those numbered after it. */
const labelsInALife = 10

/**
 * The text of a label that takes the place of `before` earlier ones: the number of the replacement stands before
 * five digits of the code, so that S417L becomes S100417L. Null when there were too many. For a code that is not
 * ours, or of six digits already, a RangeError.
 */
export function replacementLabel(code: string, side: LabelSide, before: number): string | null {
  const [, letter, digits] = /^([SB])([1-9]\d{0,4})$/.exec(code) ?? []
  if (!letter || !digits) throw new RangeError(`${code} is no code of ours`)
  return before > 0 && before < labelsInALife
    ? labelFor(`${letter}${before}${digits.padStart(5, '0')}`, side)
    : null
}

/**
 * What a scanned label says, in capitals or small letters. With a check character only: what was typed by hand is
 * read by parseTyped.
 */
export function parseLabel(text: string): ParsedLabel {
  const label = tidy(text)
  const code = readCode(label.slice(0, -1))
  if (code && checksOut(label)) return { ok: true, ...code, text: label }
  if (/^[SB]\d*$/.test(label) && label.length < 3) return { ok: false, reason: 'unfinished' }
  // ends with its side, where a check character belongs
  if (readCode(label)?.side) return { ok: false, reason: 'unfinished' }
  return { ok: false, reason: code ? 'check_character' : 'not_ours' }
}

export type ParsedTyped =
  | (LabelCode & { ok: true; text: string; checked: boolean })
  | { ok: false; reason: 'not_ours' | 'unfinished' }

/**
 * What was typed by hand, with or without the check character: 'S417', 's417l', 'S417L' and its check character.
 * A text that is a code as it stands is that code, even if its last digit could be a check character.
 */
export function parseTyped(text: string): ParsedTyped {
  const typed = tidy(text)
  const code = readCode(typed)
  if (code) return { ok: true, ...code, text: typed, checked: false }
  const label = parseLabel(typed)
  if (label.ok) return { ...label, checked: true }
  return { ok: false, reason: label.reason === 'unfinished' ? 'unfinished' : 'not_ours' }
}
