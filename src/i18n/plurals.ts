/**
 * Which form of a message fits a number. Two forms are one and many; three are none, one and many. Fractions are
 * many: 0.25 turns.
 */
export function pluralForm(choice: number, forms: number): number {
  const count = Math.abs(choice)
  if (forms >= 3) return count === 0 ? 0 : count === 1 ? 1 : 2
  return count === 1 ? 0 : 1
}
