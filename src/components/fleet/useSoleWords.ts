import { useI18n } from 'vue-i18n'

/** A sole type as people read it off a boot; one that nobody could read has words instead. */
export function useSoleWords() {
  const { t } = useI18n()
  const soleWord = (type: string) => (type === 'unknown' ? t('fleet.soleUnknown') : type)
  return { soleWord }
}
