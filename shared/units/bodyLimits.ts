/** What a mass or a height may be at all. Beyond it a number is a slip of the pen, not a renter. */
export const bodyLimits = {
  massKg: { min: 1, max: 300 },
  massLb: { min: 2, max: 660 },
  heightCm: { min: 50, max: 250 },
  heightFeet: { min: 1, max: 8 },
} as const
