import type { Check } from '../checklist/check'
import type { AnyEntry } from '../entry/entry'
import type { Limit } from '../limit/limit'
import type { Face, LineElement } from '../line/line'
import { elementsOf } from '../line/line'
import type { RoundBasis, WalkTask } from './basis'
import type { LineAsBuilt } from './lineAsBuilt'

/** Where readings of one task gather: a check on an element and face. */
export interface Slot {
  element: string
  check: Check
  face: Face | null
  keys: readonly string[]
  limits: Readonly<Record<string, Limit>>
  /** Of the element as built. */
  length: number
  bays: number
  /** False where nobody asked for it: a finding beside the list, or on an element that was struck. */
  planned: boolean
  /** One answer stands for the line (WalkTask.line). */
  line: boolean
  /** For a slot of the line: something was said of it on this very element, or a correction there disturbed it. */
  spoken: boolean
  /** Positions of the readings and set-asides that count here. */
  readings: number[]
  asides: number[]
}

/** Gives the tasks of an element that an edit of the line brought; the conditions of the checklist decide, so the caller knows how. */
export type TasksFor = (element: LineElement, basis: RoundBasis) => WalkTask[]

const tasksKnown = new WeakMap<RoundBasis, Map<string, WalkTask[]>>()
/** The tasks of each element; a basis never changes, so they are sorted out once. */
function tasksByElement(basis: RoundBasis): ReadonlyMap<string, readonly WalkTask[]> {
  const known = tasksKnown.get(basis)
  if (known) return known
  const tasksOf = new Map<string, WalkTask[]>()
  for (const task of basis.tasks) {
    const tasks = tasksOf.get(task.element)
    if (tasks) tasks.push(task)
    else tasksOf.set(task.element, [task])
  }
  tasksKnown.set(basis, tasksOf)
  return tasksOf
}

/** The slots of a round, or of some of its elements, in walking order, and the way from an entry to its slot. */
export class WalkSlots {
  readonly all: Slot[] = []
  /** Elements that an edit brought and for which nobody could say what is to be checked. */
  readonly unplanned = new Set<string>()
  readonly elements: readonly LineElement[]
  private readonly byElement = new Map<string, Map<string, Slot[]>>()
  private readonly elementById: ReadonlyMap<string, LineElement>
  private readonly checkById: ReadonlyMap<string, Check>

  constructor(private readonly basis: RoundBasis, private readonly bases: ReadonlyMap<string, RoundBasis>, built: LineAsBuilt, tasksFor: TasksFor | undefined, only?: ReadonlySet<string>) {
    const whole = elementsOf(built.line)
    this.elements = only ? whole.filter(element => only.has(element.id)) : whole
    this.elementById = new Map(this.elements.map(element => [element.id, element]))
    this.checkById = new Map(basis.checks.map(check => [check.id, check]))
    const asked = tasksByElement(basis)
    const brought = new Map<string, readonly WalkTask[]>()
    const tasksOf = (element: string) => asked.get(element) ?? brought.get(element)
    for (const { element, from } of built.brought) {
      if (asked.has(element.id)) continue
      const whole = from === null ? undefined : tasksOf(from)
      if (!tasksFor && !whole) this.unplanned.add(element.id)
      // Asking is dear: only for what is looked at here.
      else if (!tasksFor || !only || only.has(element.id)) brought.set(element.id, tasksFor ? tasksFor(element, basis) : whole!.map(task => ({ ...task, element: element.id })))
    }
    for (const element of this.elements) {
      for (const task of tasksOf(element.id) ?? []) {
        const check = this.checkById.get(task.check)
        if (check) this.add(element.id, element, check, task.face, task.limits, basis.limits, true, task.line ?? false)
      }
    }
  }

  private add(id: string, element: LineElement | undefined, check: Check, face: Face | null, keys: readonly string[], limits: Readonly<Record<string, Limit>>, planned: boolean, line = false): Slot {
    const slot: Slot = { element: id, check, face, keys, limits, length: element?.length ?? 0, bays: element?.bays ?? 1, planned, line, spoken: false, readings: [], asides: [] }
    this.all.push(slot)
    let checks = this.byElement.get(id)
    if (!checks) this.byElement.set(id, checks = new Map())
    const slots = checks.get(check.id)
    if (slots) slots.push(slot)
    else checks.set(check.id, [slot])
    return slot
  }

  /** Slots of a check on an element, or of all its checks. */
  of(element: string, check: string | null): readonly Slot[] {
    const checks = this.byElement.get(element)
    return check === null ? [...checks?.values() ?? []].flat() : checks?.get(check) ?? []
  }

  /** The planned slot that a reading answers: that of its face, else that of the element as a whole, else the only one. */
  planned({ envelope }: AnyEntry): Slot | null {
    const slots = this.byElement.get(envelope.element!)?.get(envelope.check!)
    if (!slots) return null
    const face = envelope.place === null ? null : envelope.place.face
    const first = slots[0]!
    if (first.face === face && first.planned) return first
    let whole: Slot | null = null
    let count = 0
    for (const slot of slots) {
      if (!slot.planned) continue
      if (slot.face === face) return slot
      if (slot.face === null) whole = slot
      count++
    }
    return whole ?? (face === null && count === 1 ? first : null)
  }

  /**
   * A slot for a reading where nobody asked for one, judged as the basis in force has the check, else as its own basis has it; null where neither knows it.
   * The first reading of such a slot decides whose, so call it in an order that does not hang on who came first.
   */
  beside({ envelope }: AnyEntry): Slot | null {
    const { element, check, place } = envelope
    const face = place?.face ?? null
    const there = this.of(element!, check).find(slot => !slot.planned && slot.face === face)
    if (there) return there
    const own = envelope.basis === null ? undefined : this.bases.get(envelope.basis)
    const source = this.checkById.has(check!) ? this.basis : own
    const known = source?.checks.find(one => one.id === check)
    if (!source || !known) return null
    const task = [source, own].flatMap(basis => basis?.tasks.filter(one => one.element === element && one.check === check) ?? []).sort((a, b) => Number(b.face === face) - Number(a.face === face))[0]
    const keys = (task?.limits ?? []).filter(key => Object.hasOwn(source.limits, key))
    return this.add(element!, this.elementById.get(element!), known, face, keys, source.limits, false)
  }

  /** Whether an element is on the line as built. */
  stands(element: string): boolean {
    return this.elementById.has(element)
  }
}
