import type { Shoe, ShoeSystem } from '#shared/renters/shoe'

/** How much longer a shoe's last is than the foot in it. Invented; makers differ. */
const lastOverFootMm = 15
const parisPointMm = 20 / 3
const barleycornMm = 25.4 / 3

/** Length of a shoe's last in mm. By definition of the systems; US sizes are taken as men's, one above the UK's. */
const lastMm: Record<ShoeSystem, (size: number) => number> = {
  eu: (size) => size * parisPointMm,
  uk: (size) => (size + 25) * barleycornMm,
  us: (size) => (size + 24) * barleycornMm,
}

/**
 * The mondopoint size, in cm times ten and in halves, to try first; null where the size cannot be read. Advice,
 * never a stop: the foot in the boot decides.
 */
export function adviseMondo(shoe: Shoe | null): number | null {
  if (!shoe) return null
  const footMm = 'footMm' in shoe ? shoe.footMm : footOf(shoe.size, shoe.system)
  if (footMm === null || footMm < 130 || footMm > 360) return null
  return Math.ceil(footMm / 5) * 5
}

function footOf(size: string, system: ShoeSystem): number | null {
  const number = Number(size.trim().replace(',', '.').replace('½', '.5').replace(/\s/g, ''))
  if (size.trim() === '' || !Number.isFinite(number)) return null
  return Math.round(lastMm[system](number) - lastOverFootMm)
}
