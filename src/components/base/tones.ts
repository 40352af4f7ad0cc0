import type { ItemState } from '#shared/lifecycle/itemStates'
import type { GlyphName } from '../glyphs/glyphs'

/** What a thing asks of a person: something now, nothing but knowing, to stop, nothing more, or nothing at all. */
export type Tone = 'now' | 'info' | 'stop' | 'done' | 'calm' | 'press'

export const toneGlyph = {
  now: 'now',
  info: 'info',
  stop: 'stop',
  done: 'done',
  calm: 'wait',
  press: 'claimed',
} as const satisfies Record<Tone, GlyphName>

export const stateTone: Record<ItemState, Tone> = {
  commissioning: 'info',
  racked: 'done',
  claimed: 'press',
  prepared: 'done',
  out: 'calm',
  unchecked: 'info',
  service: 'now',
  withdrawn: 'stop',
  under_test: 'info',
  lost: 'now',
  quarantine: 'stop',
  retired: 'calm',
  sold: 'calm',
}
