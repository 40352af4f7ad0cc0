/** The notches of the header's rule, in the order of the work, and the route that each leads to. */
export const stations = {
  counter: 'counter',
  bench: 'bench',
  returns: 'returns',
  board: 'board',
  fleet: 'ski-pairs',
  callBacks: 'call-backs',
  office: 'office',
} as const

export type Station = keyof typeof stations
