import { elementsOf, type Face, type LineElement } from '#shared/line/line'
import { byTool, lineChecks, nextLeft, type WalkCheck } from '#shared/round/walkPlan'
import type { FieldJob } from '~/composables/useFieldJob'

/** Where a check in hand stands in its list (of the element, or of the line), the way back from it and the way on. */
export function useWalkWay(job: FieldJob, at: { jobId: string, element: string, check: string, face: Face | null }, one: Ref<WalkCheck | null>, checks: Ref<readonly WalkCheck[]>) {
  const route = useRoute()
  const ofLine = computed(() => one.value?.line ?? false)
  const root = `/w/${at.jobId}`
  /** Where somebody came from who does not go through a list. */
  const from = computed(() => route.query.from === 'tags' ? `${root}/tags` : route.query.from ? root : null)
  const ownList = computed(() => `${root}/check/${ofLine.value ? 'line' : at.element}`)
  const list = computed(() => byTool(ofLine.value ? lineChecks(job.basis.value!, job.outcome.value!) : checks.value.filter(each => !each.line && !each.check.group)))
  const number = computed(() => list.value.findIndex(each => each.check.id === at.check && (ofLine.value || each.outcome.face === one.value?.outcome.face)) + 1)
  const asked = (check: string, element: string) => job.basis.value?.tasks.some(task => task.line && task.check === check && task.element === element) ?? false
  /** Where what is read once for the line may be read. */
  const elements = computed<LineElement[]>(() => ofLine.value && job.line.value ? elementsOf(job.line.value).filter(each => each.id === at.element || asked(at.check, each.id)) : [])

  const readAt = (element: string) => navigateTo({ path: `${root}/check/${element}/${at.check}`, query: route.query.from ? { from: route.query.from } : {} }, { replace: true })
  /** The next one that is left in its list; the list itself when none is. What was opened from a tag or a pass leads back there. */
  function onward() {
    if (from.value) return navigateTo(from.value, { replace: true })
    const next = nextLeft(list.value, { check: at.check, face: one.value?.outcome.face ?? at.face })
    if (!next) return navigateTo(ownList.value, { replace: true })
    const element = ofLine.value && next.outcome.verdict === 'notRead' && asked(next.check.id, at.element) ? at.element : next.outcome.element
    return navigateTo({ path: `${root}/check/${element}/${next.check.id}`, query: next.outcome.face ? { face: next.outcome.face } : {} }, { replace: true })
  }
  return { ofLine, number, of: computed(() => list.value.length), back: computed(() => from.value ?? ownList.value), elements, readAt, onward }
}
