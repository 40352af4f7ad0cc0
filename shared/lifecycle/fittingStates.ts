/**
 * States of a fitting. `claimed`: boots and ski pair are taken and the ticket waits for, or stands at, the bench.
 * `prepared`: the record is signed. The other three are ends; a fitting that ended is never opened again.
 */
export const fittingStates = ['claimed', 'prepared', 'handed_over', 'void', 'given_back'] as const
export type FittingState = (typeof fittingStates)[number]

export const openFittingStates = ['claimed', 'prepared'] as const satisfies readonly FittingState[]

/** Why a fitting became void: what of the inputs it was computed from is no longer true. */
export const voidReasons = [
  'renter_data_changed',
  'boots_changed',
  'sole_changed',
  'ski_pair_changed',
  'binding_model_changed',
  'correction_changed',
  'preset_changed',
  'record_error',
  'refitted',
  'cannot_be_set',
] as const
export type VoidReason = (typeof voidReasons)[number]

/**
 * States of a rental: `form` (the renter is filling it in), `waiting` (sent, the desk has not taken it), `open`
 * (at the desk, bench or hand-over), `out`, `returned`, `cancelled`.
 */
export const rentalStates = ['form', 'waiting', 'open', 'out', 'returned', 'cancelled'] as const
export type RentalState = (typeof rentalStates)[number]
