export type Scale = { min: number; max: number }

export type ScaleFit = {
  inScale: boolean
  /** Third of the scale; null outside it. Borders belong to the middle. */
  third: 'lower' | 'middle' | 'upper' | null
}

/**
 * Where a value stands on a unit's indicator scale, both ends inside. The middle third is where a unit is best
 * used (common practice, no source): advice, never a stop.
 */
export function scaleFit(value: number, { min, max }: Scale): ScaleFit {
  if (!(value >= min && value <= max)) return { inScale: false, third: null }
  // three times the distance from the lower end, so that no third is rounded
  const threefold = 3 * (value - min)
  const length = max - min
  const third = threefold < length ? 'lower' : threefold > 2 * length ? 'upper' : 'middle'
  return { inScale: true, third }
}
