import { useI18n } from 'vue-i18n'
import { markOf } from '#shared/track/marks'
import type { TrackModel, TrackUnit } from '#shared/track/trackModel'
import type { Preset } from '#shared/track/trackPlan'
import type { RuleTrack } from './ruleGeometry'

/** Moves and places of the units in the reader's words. Needs the texts of area `rule`. */
export function useRuleWords() {
  const { t, n } = useI18n()

  const unitWord = (unit: TrackUnit) => t(`rule.unit.${unit}`)

  /** Signed notches of one unit, outward positive: 'notches back', 'stays'. */
  function moveWords(unit: TrackUnit, notches: number): string {
    if (notches === 0) return t('rule.stays')
    const forward = (unit === 'toe') === notches > 0
    return t(forward ? 'rule.forward' : 'rule.back', Math.abs(notches))
  }

  /** Signed notches of the one lever of a coupled track. */
  function leverWords(notches: number): string {
    if (notches === 0) return t('rule.stays')
    return t(notches > 0 ? 'rule.longer' : 'rule.shorter', Math.abs(notches))
  }

  /** Signed turns of the fine screw, positive tightens; null where its turn is not known. */
  function screwWords(turns: number | null): string {
    if (turns === null) return t('rule.toNeutral')
    if (turns === 0) return t('rule.stays')
    const named = { turns: n(Math.abs(turns), { maximumFractionDigits: 2 }) }
    return t(turns > 0 ? 'rule.tighten' : 'rule.loosen', named, Math.abs(turns))
  }

  const mark = (track: RuleTrack, unit: TrackUnit, notch: number) =>
    markOf(track as TrackModel, unit, notch) ?? '?'

  function unitSentence(track: RuleTrack, unit: TrackUnit, at?: Preset | null, to?: Preset | null): string {
    const named = { unit: unitWord(unit) }
    if (at && to) {
      const [from, goal] = [mark(track, unit, at[unit]), mark(track, unit, to[unit])]
      return t('rule.goes', { ...named, from, to: goal, move: moveWords(unit, to[unit] - at[unit]) })
    }
    const place = to ?? at
    return place ? t('rule.at', { ...named, mark: mark(track, unit, place[unit]) }) : ''
  }

  function leverSentence(track: RuleTrack, at?: Preset | null, to?: Preset | null): string {
    if (at && to) {
      const [from, goal] = [mark(track, 'toe', at.toe), mark(track, 'toe', to.toe)]
      return t('rule.leverGoes', { from, to: goal, move: leverWords(to.toe - at.toe) })
    }
    const place = to ?? at
    return place ? t('rule.leverAt', { mark: mark(track, 'toe', place.toe) }) : ''
  }

  /** The whole rule in one sentence, for those who do not see it. */
  function ruleSentence(track: RuleTrack, at?: Preset | null, to?: Preset | null): string {
    const places = track.coupled
      ? [leverSentence(track, at, to)]
      : [unitSentence(track, 'heel', at, to), unitSentence(track, 'toe', at, to)]
    const screw = screwTurns(track, at, to)
    if (screw !== undefined) places.push(t('rule.screwSays', { move: screwWords(screw) }))
    return places.filter(Boolean).join('; ')
  }

  return { unitWord, moveWords, leverWords, screwWords, ruleSentence }
}

/** Turns to move, null where the present turn is unknown, undefined where there is no screw or nothing to move to. */
export function screwTurns(
  track: RuleTrack,
  at?: Preset | null,
  to?: Preset | null,
): number | null | undefined {
  if (!track.fineScrew || !at || typeof to?.turns !== 'number') return undefined
  return typeof at.turns === 'number' ? Math.round((to.turns - at.turns) * 1e6) / 1e6 : null
}
