/** What a keyboard event says about its key. */
export type Key = { code: string; key: string }

const letterKey = /^Key([A-Z])$/
const digitKey = /^(?:Digit|Numpad)(\d)$/

/**
 * The character of a key as a scanner means it: by its place on the keyboard, so that the layout of the computer,
 * shift and caps lock change nothing; where the event does not tell the place, by the character. Other keys: null.
 */
export function charFromKey({ code, key }: Key): string | null {
  const placed = letterKey.exec(code)?.[1] ?? digitKey.exec(code)?.[1]
  if (placed) return placed
  if ([...key].length !== 1) return null
  const capital = key.toUpperCase()
  return [...capital].length === 1 ? capital : key
}

/** Keys with which a scanner ends a code. */
export function endsScan({ code, key }: Key): boolean {
  return key === 'Enter' || key === 'Tab' || code === 'Enter' || code === 'NumpadEnter' || code === 'Tab'
}

/** Keys that change other keys and are no stroke of their own. */
export function isModifier({ key }: Key): boolean {
  return ['Shift', 'CapsLock', 'NumLock', 'ScrollLock', 'Control', 'Alt', 'AltGraph', 'Meta', 'Fn'].includes(
    key,
  )
}
