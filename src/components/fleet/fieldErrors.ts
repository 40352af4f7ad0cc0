/** Fields that a form cannot send as they are, by name, with what is wrong there. */
export type FieldErrors<Name extends string> = Partial<Record<Name, string>>

/** Keeps the fields of which something is wrong. */
export function fieldErrors<Name extends string>(
  said: Record<Name, string | false | null>,
): FieldErrors<Name> {
  return Object.fromEntries(Object.entries(said).filter(([, text]) => text)) as FieldErrors<Name>
}

/** Whether a number that may not be typed yet is a whole one of this range. */
export function isWhole(value: number | null, min: number, max: number): value is number {
  return value !== null && Number.isInteger(value) && value >= min && value <= max
}

/** Whether a number that may not be typed yet lies in this range. */
export function isWithin(value: number | null, min: number, max: number): value is number {
  return value !== null && value >= min && value <= max
}
