import { daysBetween, type Day } from '#shared/dates/days'

export type DueStanding = 'back' | 'part_back' | 'out' | 'late'

/** Where a set that is due stands: all back, some of it, still out, or out past its last day. */
export function dueStanding(set: { endsOn: Day; parts: number; out: number }, today: Day): DueStanding {
  if (set.out === 0) return 'back'
  if (daysBetween(set.endsOn, today) > 0) return 'late'
  return set.out < set.parts ? 'part_back' : 'out'
}
