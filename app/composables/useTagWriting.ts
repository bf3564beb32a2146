import type { EntryKind, PayloadOf } from '#shared/entry/entry'
import { EntryRefused } from '#shared/entry/entryRefused'
import type { FieldJob } from '~/composables/useFieldJob'
import { answersOf, type TagRow } from '~/composables/useTags'

/** Writes words on tags: one entry for each tag, on this device first. Never throws; `fault` says in words what went wrong, and what was written stays. */
export function useTagWriting(job: FieldJob) {
  const { t, te } = useI18n()
  const say = useFieldFault()
  const busy = ref(false)
  const fault = ref('')

  async function attempt(work: () => Promise<void>): Promise<boolean> {
    if (busy.value) return false
    busy.value = true
    fault.value = ''
    try {
      await work()
      return true
    }
    catch (error) {
      const key = error instanceof EntryRefused ? `walk.sync.refused.${error.code}` : ''
      fault.value = key && te(key) ? t(key) : say(error)
      return false
    }
    finally { busy.value = false }
  }

  /** The same word on several tags. */
  const write = <K extends EntryKind>(kind: K, rows: readonly TagRow[], payload: Omit<PayloadOf<K>, 'salt'>) => attempt(async () => {
    const me = job.bundle.value!.me.accountId
    const authors = new Map(job.entries.value.map(entry => [entry.envelope.id, entry.envelope.author]))
    for (const row of rows) {
      for (const answers of answersOf(kind, row, job.entries.value)) {
        // What one read oneself is said to be an error by another.
        if (kind === 'enteredInError' && answers.some(id => authors.get(id) === me)) continue
        await job.write({ kind, element: row.of.element, check: row.of.check, place: row.of.place, answers, payload })
      }
    }
  })
  return { busy, fault, attempt, write }
}
