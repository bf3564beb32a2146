import { randomBytes } from 'node:crypto'
import { uuidv7 } from 'uuidv7'
import type { EntryKind, PayloadOf, PhotoRef, Place, ReadingValue, WireEntry } from '../../shared/entry/entry'
import { makeEntry } from '../../shared/entry/makeEntry'
import type { Check } from '../../shared/checklist/check'
import { judge } from '../../shared/limit/judge'
import type { LineElement } from '../../shared/line/line'
import { elementsOf } from '../../shared/line/line'
import { formatLength } from '../../shared/measure/formatLength'
import { INCH } from '../../shared/measure/length'
import type { RoundBasis, WalkTask } from '../../shared/round/basis'
import type { RoundOutcome } from '../../shared/round/outcome'

/** A finding that the demo's inspector comes upon. */
export interface DemoFinding { element: string, check: string, tag: string, value: ReadingValue, place: Place | null, note?: string, photos: PhotoRef[], class?: 'outOfUse' | 'correctFirst' | 'ownerMayAccept' }

interface Where { organisation: string, job: string, round: string, basis: string }

/** Writes the entries of one person on one device, a minute apart, as their phone would have. */
export class DemoWalker {
  readonly device = uuidv7()
  readonly wires: WireEntry[] = []
  walk: string | null = null
  private at: number

  constructor(private readonly where: Where, private readonly pinned: RoundBasis, readonly person: { id: string, name: string }, startsAt: Date, private readonly step = 20_000) {
    this.at = startsAt.getTime()
  }

  now(): string {
    return new Date(this.at - 5 * 3_600_000).toISOString().replace('Z', '-05:00')
  }

  pause(minutes: number): void {
    this.at += minutes * 60_000
  }

  write<K extends EntryKind>(kind: K, payload: Omit<PayloadOf<K>, 'salt'>, about: { element?: string | null, check?: string | null, place?: Place | null, answers?: string[], replaces?: string[] } = {}): string {
    this.at += this.step
    const id = uuidv7()
    const { wire } = makeEntry({ kind, id, salt: randomBytes(16).toString('hex'), madeAt: this.now(), author: this.person.id, device: this.device, walk: this.walk, ...this.where, ...about, payload })
    this.wires.push(wire)
    return id
  }

  openWalk(deviceName: string): void {
    this.walk = uuidv7()
    this.write('walkOpened', { basis: this.where.basis, device: deviceName })
  }

  /** Whether the walk list asks that of that element. */
  calls(element: string, check: string): boolean {
    return this.pinned.tasks.some(task => task.element === element && task.check === check)
  }

  private goodFor(element: string, check: string): ReadingValue {
    const task = this.pinned.tasks.find(one => one.element === element && one.check === check)!
    return goodValue(this.pinned.checks.find(one => one.id === check)!, task, this.pinned, elementsOf(this.pinned.line).find(one => one.id === element)!) ?? { method: 'look', found: 'clear' }
  }

  /** Looks again at what was corrected, and finds it as it should be. */
  reread({ element, check }: { element: string, check: string }, reading: string, correction: string, place: Place | null = null): string {
    return this.write('reading', { value: this.goodFor(element, check), photos: [], reason: 'Corrected and read again.' }, { element, check, place, answers: [reading, correction], replaces: [reading] })
  }

  /** Reads again what corrections disturbed. */
  readAgainAll({ outcome }: { outcome: RoundOutcome }): void {
    for (const one of outcome.checks) {
      if (!one.readAgain) continue
      const standing = one.heads.map(head => head.entry)
      this.write('reading', { value: this.goodFor(one.element, one.check), photos: [] }, { element: one.element, check: one.check, place: one.heads[0]?.place ?? { face: one.face, bay: null, from: null, height: null }, answers: [...standing, ...one.disturbedBy], replaces: standing })
    }
  }

  /** Answers every task (or the first `share` of them) so that it conforms, except where a finding is to be. Returns the ids of findings by tag. */
  answer(findings: DemoFinding[], share = 1): Map<string, string> {
    const elements = new Map(elementsOf(this.pinned.line).map(element => [element.id, element]))
    const checks = new Map(this.pinned.checks.map(check => [check.id, check]))
    const ids = new Map<string, string>()
    const groups = new Map<string, string>()
    const once = new Set<string>()
    const tasks = this.pinned.tasks.slice(0, Math.ceil(this.pinned.tasks.length * share))
    for (const task of tasks) {
      const check = checks.get(task.check)!
      const element = elements.get(task.element)!
      const place: Place = { face: task.face, bay: null, from: null, height: null }
      const found = findings.find(one => one.element === task.element && one.check === task.check && (task.face === null || one.place?.face === task.face))
      if (found) {
        if (task.line) once.add(task.check)
        ids.set(found.tag, this.write('reading', { value: found.value, tag: found.tag, photos: found.photos, ...(found.note ? { note: found.note } : {}), ...(found.class ? { class: found.class } : {}) }, { element: task.element, check: task.check, place: found.place ?? place }))
        continue
      }
      if (task.line && once.has(task.check)) continue
      if (task.line) once.add(task.check)
      const value = goodValue(check, task, this.pinned, element)
      if (!value) this.write('setAside', { as: 'notApplicable', why: 'notHere', photos: [] }, { element: task.element, check: task.check, place })
      else {
        const group = check.group && value.method === 'look' ? groups.get(task.element) ?? groups.set(task.element, uuidv7()).get(task.element)! : undefined
        for (const bay of check.answeredFor === 'bay' ? Array.from({ length: element.bays }, (_, at) => at + 1) : [null]) this.write('reading', { value, photos: [], ...(group ? { group } : {}) }, { element: task.element, check: task.check, place: { ...place, bay } })
      }
    }
    return ids
  }
}

/** What a tape or caliper would say on a fence like the demo's, in inches; null where the fence has nothing of the kind. */
const USUAL: Record<string, number | null> = {
  'tie-spacing-post': 14, 'tie-spacing-rail': 22, 'tie-spacing-wire': 17.5, 'band-spacing': 11.5, 'band-end-distance': 3, 'line-post-spacing': 119.5, 'fabric-give': 1.25, 'gap-below': 1.5, 'gap-below-pushed': 1.75,
  'opening': 2.125, 'mesh-size': 2, 'climbable-distance': 61, 'swing-clearance': 1.25, 'pipe-outside-diameter': 1.9, 'pipe-wall': 0.12, 'fabric-wire-diameter': 0.148, 'tie-wire-diameter': 0.148,
  'barbed-wire-height': null, 'barbed-tape-height': null, 'automatic-bottom-edge': null, 'bottom-edge-protrusion': null, 'gates-in-series': null, 'vehicle-clear-width': null, 'opening-beside-slat': null, 'slide-gate-opening': null,
  'latch-below-top': null, 'opening-near-latch': null, 'clear-width': 44.25, 'manoeuvring-depth': 64, 'manoeuvring-latch-side': 24, 'threshold-height': 0.25, 'smooth-bottom-height': 10.5, 'use-zone': 78, 'finger-opening': 1.125, 'latch-release-height': 54, 'latch-side-projection': 3,
}

const tape = (amount: number): ReadingValue => ({ method: 'measure', amount, text: formatLength(amount, { system: 'imperial' }).text, system: 'imperial' })

/** A value that conforms with the limits of a task; null where the demo's fence has nothing of the kind. */
function goodValue(check: Check, task: WalkTask, basis: RoundBasis, element: LineElement): ReadingValue | null {
  if (check.measurand && USUAL[check.measurand] === null) return null
  if (check.method === 'look') return { method: 'look', found: 'clear' }
  if (check.method === 'trial') return { method: 'trial', tries: (check.tries ?? [{ from: 'once', times: 1 }]).map(({ from, times }) => ({ from, good: times, of: times })) }
  if (check.method === 'template') return { method: 'template', gauge: 'gauge of the set', went: check.conformsWhen === 'passes' ? 'passed' : 'stopped' }
  const fits = (amount: number) => task.limits.every(key => judge({ amount, system: 'imperial' }, basis.limits[key]!).verdict === 'conforms')
  if (check.method === 'count') return [2, 1, 0, 3, 4].filter(fits).map((amount): ReadingValue => ({ method: 'count', amount }))[0] ?? null
  if (check.unit === 'length') {
    const usual = check.measurand === 'fence-height' ? element.height : check.measurand === 'mesh-size' && element.mesh ? element.mesh : Math.round((USUAL[check.measurand ?? ''] ?? 1) * INCH)
    const heights = [usual]
    const candidates = [...heights, ...(check.measurand === 'latch-release-height' ? [46] : []), 1, 1.5, 2, 0.25, 0, 3.25, 12, 14, 34, 40, 46, 54, 55, 60, 72, 120, 240].map((inches, at) => at < heights.length ? inches : Math.round(inches * INCH))
    const amount = candidates.find(fits)
    return amount === undefined ? null : tape(amount)
  }
  const steps = check.unit === 'angle' ? [500, 60_000] : check.unit === 'time' ? [5200, 1800] : [4000, 8000]
  const amount = steps.find(fits)
  return amount === undefined ? null : { method: 'measure', amount, text: `${amount / 1000}`, system: 'imperial' }
}
