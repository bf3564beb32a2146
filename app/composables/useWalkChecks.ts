import { elementsOf, type Face } from '#shared/line/line'
import { isLeft, unread, walkChecks, type WalkCheck } from '#shared/round/walkPlan'
import type { AsideOf } from '#shared/round/readingLinks'
import type { FieldJob } from '~/composables/useFieldJob'

/** An element of a job with all its checks as they stand on this device. */
export function useWalkChecks(job: FieldJob, elementId: MaybeRefOrGetter<string | null>) {
  const element = computed(() => job.line.value ? elementsOf(job.line.value).find(one => one.id === toValue(elementId)) ?? null : null)
  const checks = computed<WalkCheck[]>(() => element.value && job.basis.value && job.outcome.value ? walkChecks(job.basis.value, job.outcome.value, element.value) : [])
  /** Of the element itself; what is answered once for the line belongs to none. */
  const left = computed(() => checks.value.filter(one => !one.line && isLeft(one)))
  const asideOf: AsideOf = (id) => {
    const found = job.entries.value.find(entry => entry.envelope.id === id)
    return found ? found.envelope.check === null ? 'element' : 'check' : null
  }
  /** A check here; one that nobody asked for stands as not read, so that a finding of it can still be written. */
  function find(checkId: string, face: Face | null): WalkCheck | null {
    const own = checks.value.find(one => one.check.id === checkId && one.outcome.face === face) ?? checks.value.find(one => one.check.id === checkId)
    if (own) return own
    const check = job.basis.value?.checks.find(one => one.id === checkId)
    return check && element.value
      ? { check, limits: [], open: [], line: false, outcome: unread(element.value.id, check.id, face) }
      : null
  }
  return { element, checks, left, asideOf, find }
}
