/** Lists gone through with nothing found. */
export const soundSkis = {
  edge: 'sound',
  base: 'sound',
  brake: 'sound',
  heel: 'sound',
  toe: 'sound',
  slide_plate: 'sound',
  screws: 'sound',
} as const
export const soundBoots = { sole_wear: 'sound', buckles: 'sound', shell: 'sound', liner: 'sound' } as const
