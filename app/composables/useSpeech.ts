import type { System } from '#shared/measure/length'
import { Speech } from '#shared/record/speech'
import { WORDING } from '#shared/record/wording'

/** Amounts, limits, margins and places in the very words of the record, in the language of the screen. */
export function useSpeech(system: MaybeRefOrGetter<System>) {
  const { locale } = useI18n()
  return computed(() => new Speech({ wording: WORDING[locale.value === 'es' ? 'es' : 'en'], system: toValue(system), zones: {} }))
}
