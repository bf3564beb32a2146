import { elementsOf } from '#shared/line/line'
import { readyToSign, type SignReasonCode, type SignScope } from '#shared/round/readyToSign'
import type { FieldJob } from '~/composables/useFieldJob'

/** What stands against a record, or is listed in it: one line a reason, each with its places. */
export interface SignReasonLine { why: SignReasonCode, stops: boolean, count: number, places: { words: string, to: string }[] }

/** Reasons of a scope in words, with where each is seen to. */
export function useSignReasons(job: FieldJob, jobId: string, scope: MaybeRefOrGetter<SignScope>) {
  const { locale } = useI18n()
  return computed<SignReasonLine[]>(() => {
    const { outcome, basis } = { outcome: job.outcome.value, basis: job.basis.value }
    if (!outcome || !basis) return []
    const tags = new Map(elementsOf(outcome.line).map(element => [element.id, element.tag]))
    const titles = new Map(basis.checks.map(check => [check.id, check.title[locale.value === 'es' ? 'es' : 'en']]))
    const lines = new Map<SignReasonCode, SignReasonLine>()
    for (const reason of readyToSign(outcome, toValue(scope)).reasons) {
      const line = lines.get(reason.why) ?? { why: reason.why, stops: false, count: 0, places: [] }
      lines.set(reason.why, line)
      line.stops ||= reason.stops
      line.count++
      const deficiency = outcome.deficiencies.find(one => one.id === reason.deficiency)
      const element = reason.element ? tags.get(reason.element) ?? '' : ''
      if (deficiency) line.places.push({ words: `${deficiency.tag} ${element}, ${titles.get(deficiency.check) ?? deficiency.check}`, to: `/w/${jobId}/tags#${deficiency.tag}` })
      else if (reason.element && reason.check) line.places.push({ words: `${element}, ${titles.get(reason.check) ?? reason.check}`, to: `/w/${jobId}/check/${reason.element}/${reason.check}${reason.face ? `?face=${reason.face}` : ''}` })
      else if (reason.element) line.places.push({ words: element, to: `/w/${jobId}/check/${reason.element}` })
      else if (reason.why === 'conflict') line.places.push({ words: '', to: `/w/${jobId}/line` })
    }
    return [...lines.values()].sort((a, b) => Number(b.stops) - Number(a.stops))
  })
}
