/** Six digits, as they are typed at a station. */
export const pinShape = /^\d{6}$/
/** Wrong ones in a row; after them the password is asked for. */
export const pinTriesAllowed = 5

/** Whether anybody would try it first: one digit six times, or digits that count up or down. */
export function isSimplePin(pin: string): boolean {
  const steps = [...pin].slice(1).map((digit, at) => Number(digit) - Number(pin[at]))
  return [0, 1, -1].some((step) => steps.every((found) => found === step))
}
