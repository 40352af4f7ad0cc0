import { useI18n } from 'vue-i18n'
import { markOf } from '#shared/track/marks'
import type { TrackModel } from '#shared/track/trackModel'

interface Stands {
  toe: number | null
  heel: number | null
  turns: number | null
}

/** Where the units of a ski stand, by the marks that are printed on its rails. */
export function usePresetWords() {
  const { t, n } = useI18n()

  /** 'toe 4, heel 5', the one mark of a coupled track, or that nobody has read it. */
  function standsAt(track: TrackModel, { toe, heel, turns }: Stands): string {
    const [toeMark, heelMark] = [toe, heel].map((notch, index) =>
      notch === null ? null : markOf(track, index === 0 ? 'toe' : 'heel', notch),
    )
    if (!toeMark || !heelMark) return t('fleet.notRead')
    if (track.coupled && toe === heel) return t('fleet.standsCoupled', { mark: toeMark })
    const screw = turns ? t('fleet.standsTurns', { turns: n(turns, { signDisplay: 'always' }) }) : ''
    return t('fleet.standsAt', { toe: toeMark, heel: heelMark }) + screw
  }

  return { standsAt }
}
