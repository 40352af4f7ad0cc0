export const shoeSystems = ['eu', 'uk', 'us'] as const
export type ShoeSystem = (typeof shoeSystems)[number]

/** A shoe size as typed with its system, or the foot's length in mm: for advice only. */
export type Shoe = { size: string; system: ShoeSystem } | { footMm: number }

/** What a shoe size of a system may be at all; beyond it a number is a slip. Invented, drawn wide. */
export const shoeLimits: Record<ShoeSystem, { min: number; max: number }> = {
  eu: { min: 15, max: 55 },
  uk: { min: 0, max: 18 },
  us: { min: 0, max: 19 },
}

/** What a foot's length may be, in cm. Invented, drawn wide. */
export const footLimitsCm = { min: 9, max: 36 } as const
