/**
 * States of a ski pair or a pair of boots and every edge between them. The database holds the same edges
 * (table lifecycle_edges; a test compares the two); no other edge exists.
 */
export const itemStates = [
  'commissioning',
  'racked',
  'claimed',
  'prepared',
  'out',
  'unchecked',
  'service',
  'withdrawn',
  'under_test',
  'lost',
  'quarantine',
  'retired',
  'sold',
] as const
export type ItemState = (typeof itemStates)[number]

export const itemKinds = ['ski_pair', 'boots'] as const
export type ItemKind = (typeof itemKinds)[number]

/** From each state, the states a command may lead to. Quarantine is reached from every other state. */
const next: Record<ItemState, readonly ItemState[]> = {
  commissioning: ['racked'],
  racked: ['claimed', 'unchecked', 'service', 'under_test', 'retired', 'sold'],
  claimed: ['prepared', 'racked', 'unchecked', 'service'],
  prepared: ['out', 'racked', 'unchecked', 'service'],
  out: ['unchecked', 'lost'],
  unchecked: ['racked', 'service', 'withdrawn'],
  service: ['unchecked'],
  withdrawn: ['service', 'retired', 'sold'],
  under_test: ['racked', 'service'],
  lost: ['unchecked'],
  quarantine: ['unchecked', 'service', 'retired'],
  retired: [],
  sold: [],
}

/** The states a command may lead to from here. */
export function nextStates(from: ItemState): ItemState[] {
  return from === 'quarantine' ? [...next.quarantine] : [...next[from], 'quarantine']
}

export function canMove(from: ItemState, to: ItemState): boolean {
  return nextStates(from).includes(to)
}

/** Every edge of the life cycle. An undo is no edge: it is a change back along the item's latest change. */
export const lifecycleEdges: readonly { from: ItemState; to: ItemState }[] = itemStates.flatMap((from) =>
  nextStates(from).map((to) => ({ from, to })),
)
