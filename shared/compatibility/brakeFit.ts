export type BrakeFit = 'fits' | 'narrower_than_ski' | 'wider_than_usual' | 'unknown'

/** How much wider than the waist a brake may be. Mounting guides: 15 mm in one, 20 mm in another; the smaller. */
export const brakeOverWaistMm = { min: 0, max: 15 } as const

/** A brake against the waist of its ski, in mm. Narrower than the ski does not close; wider than usual catches. */
export function brakeFit(brakeMm: number | null, waistMm: number): BrakeFit {
  if (brakeMm === null) return 'unknown'
  const over = brakeMm - waistMm
  if (over < brakeOverWaistMm.min) return 'narrower_than_ski'
  return over > brakeOverWaistMm.max ? 'wider_than_usual' : 'fits'
}
