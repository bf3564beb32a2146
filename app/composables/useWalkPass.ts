import { useLocalStorage } from '@vueuse/core'
import { elementsOf, type Face, type LineElement } from '#shared/line/line'
import { bayEnd } from '#shared/line/layLine'
import { entryOf, facesAsked, nextElement, passOrder, stepBack, stepOn, type WalkPosition } from '#shared/round/walkPlan'
import type { FieldJob } from '~/composables/useFieldJob'

/** Something that was just done and may be taken back: entries not yet sent, or a step along the fence. */
export interface WalkAct { label: string, where: string, entries: string[], from: (WalkPosition & { end: boolean }) | null }

interface Kept {
  round: string
  face: Face
  backwards: boolean
  at: WalkPosition
  /** The element in hand is behind one: its looks are to be confirmed. */
  end: boolean
  /** Faces of the passes of this walk, in order; the last one is being walked. */
  passes: Face[]
  /** The last pass came to the end of the line. */
  done: boolean
  recent: WalkAct[]
}

const RECENT = 3

/** Where somebody is on a walk: which face, which way, at which place. The device remembers it; it is nobody's reading, so no entry is written of it. */
export function useWalkPass(job: FieldJob, jobId: string) {
  const kept = useLocalStorage<Kept | null>(`smoothside pass ${jobId}`, null, { serializer: { read: text => JSON.parse(text) as Kept | null, write: value => JSON.stringify(value) } })
  const line = computed(() => job.line.value)
  /** Null before the first pass, after another round has begun, and where the element was struck meanwhile. */
  const pass = computed(() => {
    const [own, of] = [kept.value, line.value]
    if (!own || !of || own.round !== job.bundle.value?.round.id || own.done) return null
    return elementsOf(of).some(element => element.id === own.at.element) ? own : null
  })
  const passes = computed(() => kept.value && kept.value.round === job.bundle.value?.round.id ? kept.value.passes : [])
  const element = computed<LineElement | null>(() => pass.value && line.value ? elementsOf(line.value).find(one => one.id === pass.value!.at.element) ?? null : null)
  const asked = computed(() => job.outcome.value ? facesAsked(job.outcome.value) : [])
  const count = computed(() => passes.value.length + asked.value.filter(face => !passes.value.includes(face)).length)
  /** Along the element, to the middle of the bay in hand. */
  const along = computed(() => !element.value ? 0 : element.value.kind === 'run' ? Math.round((bayEnd(element.value, pass.value!.at.bay - 1) + bayEnd(element.value, pass.value!.at.bay)) / 2) : Math.round(element.value.length / 2))

  /** Faces of the passes that came to their end; one that is broken off for another is not among them. */
  const finished = computed(() => pass.value ? passes.value.slice(0, -1) : passes.value)

  async function begin(face: Face, backwards: boolean, at?: string) {
    await job.startWalk()
    const first = elementsOf(line.value!).find(one => one.id === at) ?? passOrder(line.value!, backwards)[0]!
    kept.value = { round: job.bundle.value!.round.id, face, backwards, at: entryOf(first, backwards), end: false, passes: [...finished.value, face], done: false, recent: [] }
  }
  const change = (to: Partial<Kept>) => { kept.value = { ...kept.value!, ...to } }
  const here = () => ({ ...pass.value!.at, end: pass.value!.end })
  function remember(act: WalkAct) {
    if (kept.value) change({ recent: [act, ...kept.value.recent].slice(0, RECENT) })
  }
  /** One place on. Answers `end` when the element is behind one. */
  function forward(act: Omit<WalkAct, 'entries' | 'from'>) {
    const step = stepOn(line.value!, pass.value!.at, pass.value!.backwards)
    if (!step) return
    const from = here()
    change('to' in step ? { at: step.to, end: false } : { end: true })
    remember({ ...act, entries: [], from })
  }
  function back() {
    if (pass.value!.end) return change({ end: false })
    const to = stepBack(line.value!, pass.value!.at, pass.value!.backwards)
    if (to) change({ at: to })
  }
  /** On to the next element; at the end of the line the pass is done. */
  function leave() {
    const next = nextElement(line.value!, pass.value!.at.element, pass.value!.backwards)
    change(next ? { at: entryOf(next, pass.value!.backwards), end: false } : { end: false, done: true })
  }
  function goTo(id: string) {
    const target = elementsOf(line.value!).find(one => one.id === id)
    if (target && pass.value) change({ at: entryOf(target, pass.value.backwards), end: false })
  }
  /** Takes back one of the last acts; false where its entries have gone out already. */
  async function takeBack(at: number): Promise<boolean> {
    const act = kept.value?.recent[at]
    if (!act || (act.entries.length > 0 && !await job.takeBack(act.entries))) return false
    const { recent } = kept.value!
    change({ recent: recent.filter((_, i) => i !== at), ...(act.from && { at: { element: act.from.element, bay: act.from.bay }, end: act.from.end }) })
    return true
  }
  /** The bay in hand, where this element is the one in hand. */
  const bayOf = (id: string) => element.value?.id === id && element.value.kind === 'run' ? pass.value!.at.bay : null
  return { pass, element, along, number: computed(() => passes.value.length), count, asked, walked: finished, begin, forward, back, leave, goTo, takeBack, remember, bayOf, recent: computed(() => kept.value?.recent ?? []) }
}
export type WalkPassState = ReturnType<typeof useWalkPass>
