import { GateRefusal } from '#shared/gate/gateRefusal'
import { LimitRefused } from '#shared/limit/limitRefused'
import type { Window } from '#shared/limit/window'
import { bandOfLimits } from '#shared/drawing/limitBand'
import type { Limit } from '#shared/limit/limit'
import { elementsOf } from '#shared/line/line'
import type { LimitsTogether, Together } from '#shared/provision/limitsTogether'
import { limitsTogether } from '#shared/provision/limitsTogether'
import type { QuestionAbout } from '#shared/question/question'
import type { RoundBasis } from '#shared/round/basis'

/** What was brought together of a basis already: several parts of a page ask for the same one. */
const known = new WeakMap<RoundBasis, LimitsTogether>()

/** All limits of a job brought together, and the words and drawings that a screen needs to tell of them. */
export function useLimitsTogether(basis: MaybeRefOrGetter<RoundBasis>) {
  const { t, locale } = useI18n()
  const held = computed(() => toValue(basis))
  const system = computed(() => held.value.line.system)
  const speech = useSpeech(system)
  const tags = computed(() => new Map(elementsOf(held.value.line).map(element => [element.id, element.tag])))
  const checks = computed(() => new Map(held.value.checks.map(check => [check.id, check])))
  /** Null with its reason where the limits make no sense together. */
  const found = computed<{ all: LimitsTogether | null, refused: string }>(() => {
    const raw = toRaw(held.value)
    try {
      const all = known.get(raw) ?? limitsTogether(raw)
      known.set(raw, all)
      return { all, refused: '' }
    }
    catch (error) {
      if (error instanceof LimitRefused || error instanceof GateRefusal) return { all: null, refused: error.message }
      throw error
    }
  })
  const limitOf = (key: string): Limit => held.value.limits[key]!
  const both = (text: { en: string, es: string }) => text[locale.value === 'es' ? 'es' : 'en']
  const title = (one: Pick<Together, 'checks'>) => both(checks.value.get(one.checks[0]!)!.title)
  const amount = (value: number, unit: Limit['unit']) => speech.value.amount(value, unit, { beside: [value] })
  const places = (ids: readonly string[]) => {
    const named = [...new Set(ids)].map(id => tags.value.get(id) ?? '')
    return named.length > 9 ? t('limits.placesMore', { tags: named.slice(0, 7).join(', '), n: named.length - 7 }) : named.join(', ')
  }

  function windowWords({ low, high }: Window, unit: Limit['unit']): string {
    const [from, to] = [low && amount(low.amount, unit), high && amount(high.amount, unit)]
    if (low && high && low.amount === high.amount) return t('limits.window.exactly', { x: from! })
    if (low && high) return t('limits.window.between', { low: from!, high: to! })
    if (low) return t(low.inclusive ? 'limits.window.atLeast' : 'limits.window.over', { x: from! })
    return high ? t(high.inclusive ? 'limits.window.atMost' : 'limits.window.under', { x: to! }) : t('limits.window.open')
  }

  /** Where the limits come from two datums that do not always meet: how far they lie apart in what is told. */
  function gapOf({ joined }: Together): QuestionAbout['gap'] {
    return joined && !joined.always ? { upper: joined.upper, lower: joined.lower, at: joined.at ?? joined.works?.to ?? joined.gap.from } : null
  }
  /** The limits over a stretch of tape; from two datums at the gap that is told. */
  const band = (one: Together) => bandOfLimits(one.limits.map(limitOf), { gap: gapOf(one), system: system.value, figure: value => amount(value, one.unit) })
  return { found, speech, limitOf, both, title, amount, places, windowWords, gapOf, band, checks, tags }
}
