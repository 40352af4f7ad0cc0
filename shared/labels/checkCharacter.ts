/**
 * The alphabet of our labels: digits and the capitals that stand on the same key of a QWERTY, QWERTZ and AZERTY
 * keyboard (so not A, Q, W, Z, Y, M), without I and O, which read like 1 and 0. No character needs shift.
 */
export const labelAlphabet = '0123456789BCDEFGHJKLNPRSTUVX'

/*
 * The 28 characters are taken as pairs of a number modulo 4 and one modulo 7, and the pairs as elements of the
 * field of four and the field of seven. Each character is weighted with a power of g = (w, 3), w the element of the
 * field of four with w·w = w + 1. g, g - 1 and g·g - 1 are invertible in both fields, so that no single wrong
 * character, no swap of two neighbours and no swap across one character can leave the sum unchanged, at any
 * length. (A sum modulo 28 could not do this: 28 is even.)
 */
const timesW = [0, 2, 3, 1] as const

function weightedSum(text: string): { four: number; seven: number } | null {
  let [four, seven] = [0, 0]
  for (const character of text) {
    const value = labelAlphabet.indexOf(character)
    if (value < 0) return null
    four = (timesW[four] ?? 0) ^ (value % 4)
    seven = (3 * seven + value) % 7
  }
  return { four, seven }
}

/** The check character of a code, both in capitals; null where the code has a character that labels do not have. */
export function checkCharacter(code: string): string | null {
  const sum = weightedSum(code)
  if (!sum) return null
  // what the next character must be for the whole sum to become nothing in either field
  const four = timesW[sum.four] ?? 0
  const seven = (7 - ((3 * sum.seven) % 7)) % 7
  // 21 is 1 modulo 4 and 0 modulo 7; 8 is 0 modulo 4 and 1 modulo 7
  return labelAlphabet.charAt((21 * four + 8 * seven) % 28)
}

/** Whether the last character is the check character of the rest. */
export function checksOut(text: string): boolean {
  const sum = weightedSum(text)
  return text.length > 1 && sum?.four === 0 && sum.seven === 0
}
