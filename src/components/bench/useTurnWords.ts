import { useI18n } from 'vue-i18n'

/** Turns of the fine screw from its neutral mark, in words: '0.5 tighter', 'neutral mark'. */
export function useTurnWords(): (turns: number) => string {
  const { t, n } = useI18n()
  return (turns) => {
    if (turns === 0) return t('bench.turns.neutral')
    const named = { turns: n(Math.abs(turns), { maximumFractionDigits: 2 }) }
    return t(turns > 0 ? 'bench.turns.tighter' : 'bench.turns.looser', named)
  }
}
