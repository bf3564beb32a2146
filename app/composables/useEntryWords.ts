import type { AnyEntry, KeptEntry } from '#shared/entry/entry'
import { isKnown } from '#shared/entry/entry'
import { elementsOf } from '#shared/line/line'
import { stepRecord } from '#shared/record/buildRecord'
import { sentence } from '#shared/record/wording'
import type { FieldJob } from '~/composables/useFieldJob'

/** An entry as it is read before it is signed: what it is, about what, what it says, by whom and when. */
export interface EntryWords { id: string, kind: string, about: string, says: string, by: string, at: string, photos: number }

/** Puts entries of a job into words. An entry of a kind that this program does not know is told so, never left out. */
export function useEntryWords(job: FieldJob) {
  const { t, locale } = useI18n()
  const { moment } = useMoment()
  const speech = useSpeech(() => job.basis.value?.line.system ?? 'imperial')
  const elements = computed(() => new Map([...job.basis.value ? elementsOf(job.basis.value.line) : [], ...job.line.value ? elementsOf(job.line.value) : []].map(element => [element.id, element.tag])))
  const checks = computed(() => new Map(job.basis.value?.checks.map(check => [check.id, check])))
  const people = computed(() => new Map(job.bundle.value?.people.map(one => [one.accountId, one.name])))
  const nameOf = (account: string) => people.value.get(account) ?? t('signature.somebody')

  function says(entry: AnyEntry): string {
    if (entry.payload === null) return speech.value.w.phrases.erased
    const { w } = speech.value
    const step = stepRecord(entry, { nameOf })
    const check = checks.value.get(entry.envelope.check ?? '')
    const verdict = job.outcome.value?.checks.flatMap(one => one.heads).find(head => head.entry === entry.envelope.id)?.verdict
    const why = 'why' in entry.payload ? entry.payload.why : ''
    const edit = 'edit' in entry.payload ? t(`signature.edit.${entry.payload.edit.kind}`) : ''
    return [
      step.value ? speech.value.reading(step.value, { unit: check?.unit ?? null }) : '',
      verdict ? w.verdicts[verdict] : '',
      w.whys[why as keyof typeof w.whys] ?? why, edit,
      step.person ?? '', step.waitsFor ?? '', step.done ? w.helds[step.done] : '', step.decision ? w.decisions[step.decision] : '', step.document ?? '',
      step.due ? moment(step.due) : '', step.words ?? '', step.reason ?? '', step.condition ?? '', step.until ? speech.value.day(step.until) : '',
    ].filter(Boolean).join(' · ')
  }

  return (entry: KeptEntry): EntryWords => {
    const { id, kind, element, check, place, author, madeAt } = entry.envelope
    const known = isKnown(entry)
    return {
      id,
      kind: known ? sentence(speech.value.w.entryKinds[entry.envelope.kind]) : t('signature.unknownKind', { kind }),
      about: [element ? elements.value.get(element) ?? '' : '', check ? checks.value.get(check)?.title[locale.value === 'es' ? 'es' : 'en'] ?? check : '', speech.value.place(place)].filter(Boolean).join(', '),
      says: known ? says(entry) : '',
      by: nameOf(author),
      at: moment(madeAt),
      photos: known && entry.payload && 'photos' in entry.payload ? entry.payload.photos.length : 0,
    }
  }
}
