/** What a track calculation takes at all, in mm. */
export const trackLimits = {
  soleLengthMm: { min: 150, max: 400 },
  offsetMm: { min: -100, max: 100 },
} as const
