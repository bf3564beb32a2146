import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { checkSchema, type Check, type Checklist } from '#shared/checklist/check'
import { compileCondition } from '#shared/checklist/condition'
import { factsOf } from '#shared/checklist/facts'
import { ELEMENT_KINDS, elementSchema, FACES, GATE_FORMS, SETTINGS, WORKS } from '#shared/line/line'
import type { Line, LineElement } from '#shared/line/line'
import type { Provision } from '#shared/provision/provision'
import { limitsInForce } from '#shared/provision/limitsInForce'
import { canonicalJson } from '#shared/record/canonicalJson'
import { ChecklistsDiffer, makeBasis, tasksFor } from '#shared/round/makeBasis'
import { LimitsDiffer, walkList } from '#shared/round/walkList'
import { readBuiltIn } from '#server/services/checklist/readBuiltIn'
import { aGate, aRun } from '../../../fixtures/subjects/elements'

const lists = readBuiltIn()
const lineOf = (...elements: LineElement[]): Line => ({ version: 1, system: 'imperial', sides: [{ key: 'A', name: 'North', elements }] })
const city: Provision = {
  id: 'city-gap', kind: 'authority', measurand: 'gap-below', setting: 'pool', effect: 'replace',
  limit: { datum: 'ground', unit: 'length', low: null, high: { imperial: 8_128_000, inclusive: true }, avoid: null },
  name: 'City of Example', citation: '12.4', confirmedBy: 'A. Clerk', confirmedOn: '2026-11-02',
}
const checksOn = (element: LineElement) => new Set(makeBasis(lineOf(element), lists, []).tasks.map(task => task.check))

describe('makeBasis', () => {
  it('asks of each element what its kind and settings call for', () => {
    const away = checksOn(aRun({ outer: ['walkway'] }))
    const pool = checksOn(aRun({ outer: ['walkway'], inner: ['pool'] }))
    expect(away.has('tie-ends-in')).toBe(true)
    expect(away.has('pool-sphere')).toBe(false)
    expect(pool.has('pool-sphere')).toBe(true)
    expect(pool.has('clear-width')).toBe(false)
    const gate = checksOn(aGate({}, { inner: ['pool'] }))
    expect(gate.has('latch-height-leaf') && gate.has('gate-closes-latches')).toBe(true)
    expect(gate.has('exit-not-locked')).toBe(false)
    expect(checksOn(aGate({ exit: true })).has('exit-not-locked')).toBe(true)
  })
  it('tries nothing by hand on an automatic gate, and refers it', () => {
    const { tasks, checks } = makeBasis(lineOf(aGate({ automatic: true, form: 'slide' }, { outer: ['school'] })), lists, [])
    const method = new Map(checks.map(check => [check.id, check.method]))
    // What is left to try there are bolts: nothing that moves the leaf
    expect(tasks.filter(task => method.get(task.check) === 'trial').map(task => task.check).sort()).toEqual(['bolts-tight'])
    expect(tasks.map(task => task.check)).toContain('automatic-referred')
  })
  it('asks nothing of workmanship where the fence is others\' work', () => {
    const found = makeBasis(lineOf({ ...aRun({ outer: ['school'] }), work: 'existing' }), lists, [])
    const concern = new Map(found.checks.map(check => [check.id, check.concern]))
    expect(found.tasks.filter(task => concern.get(task.check) === 'workmanship')).toEqual([])
    expect(found.tasks.map(task => task.check)).toContain('tie-ends-in')
  })
  it('makes a task a face where the check is of the face, outer first', () => {
    const { tasks } = makeBasis(lineOf(aRun({ outer: ['school'] })), lists, [])
    expect(tasks.filter(task => task.check === 'tie-ends-in').map(task => task.face)).toEqual(['outer', 'inner'])
    expect(tasks.filter(task => task.check === 'fence-height').map(task => task.face)).toEqual([null])
  })
  it('walks along the line, and within an element in the order of the checklist', () => {
    const [first, second] = [aRun({ inner: ['pool'] }, 7), aGate({}, { inner: ['pool'] }, 3)]
    const { tasks, checks } = makeBasis(lineOf(first, second), lists, [])
    const borders = tasks.map(task => task.element).filter((id, at, all) => id !== all[at - 1])
    expect(borders).toEqual([first.id, second.id])
    const order = new Map(checks.map((check, at) => [check.id, at]))
    for (const element of [first, second]) {
      const places = tasks.filter(task => task.element === element.id).map(task => order.get(task.check)!)
      expect(places).toEqual([...places].sort((one, other) => one - other))
    }
  })
  it('holds each limit once, and every key points to one', () => {
    const elements = Array.from({ length: 6 }, (_, at) => aRun({ inner: ['pool'] }, at + 1))
    const { tasks, limits } = makeBasis(lineOf(...elements), lists, [])
    expect(Object.entries(limits).every(([key, limit]) => key === limit.id)).toBe(true)
    expect(tasks.flatMap(task => task.limits).filter(key => !Object.hasOwn(limits, key))).toEqual([])
    // No run owes a clear width, but a gate that is added in the field would
    expect(Object.keys(limits)).toContain('C01.clear-width.leaf-face-to-stop')
    expect(tasks.filter(task => task.check === 'gap-below').map(task => task.limits)).toEqual(elements.map(() => ['A07.gap-below.ground']))
  })
  it('pins local numbers, and what they put aside', () => {
    const { tasks, limits, setAside, provisions } = makeBasis(lineOf(aRun({ inner: ['pool'] })), lists, [city])
    expect(tasks.find(task => task.check === 'gap-below')?.limits).toEqual(['city-gap'])
    expect(limits['city-gap']).toMatchObject({ high: { imperial: 8_128_000 }, basis: { kind: 'authority', citation: '12.4' } })
    expect(limits).toHaveProperty(['A07.gap-below.ground'])
    expect(setAside).toMatchObject([{ limit: { id: 'A07.gap-below.ground' }, by: 'city-gap', why: 'replaced' }])
    expect(provisions).toEqual([city])
  })
  it('has one canonical form, whatever the order of local numbers and of stored keys', () => {
    const other: Provision = { ...city, id: 'b-note', limit: null, effect: 'add', note: 'Ask first.', edition: undefined }
    const shuffled = lists.map(list => JSON.parse(JSON.stringify(list, (_, value: unknown) => value && typeof value === 'object' && !Array.isArray(value) ? Object.fromEntries(Object.entries(value).reverse()) : value)) as Checklist)
    const line = lineOf(aRun({ inner: ['pool'] }), aGate({}, { inner: ['pool'] }))
    expect(canonicalJson(makeBasis(line, shuffled, [other, city]))).toBe(canonicalJson(makeBasis(line, lists, [city, other])))
  })
  it('refuses two wordings of one check, and two limits of one id', () => {
    const changed = structuredClone(lists[0]!)
    changed.checks[0]!.task.en = 'Something else.'
    expect(() => makeBasis(lineOf(aRun()), [lists[1]!, changed], [])).toThrow(ChecklistsDiffer)
    const twin: Provision = { ...city, id: 'A07.gap-below.ground', effect: 'add' }
    expect(() => makeBasis(lineOf(aRun({ inner: ['pool'] })), lists, [twin])).toThrow(LimitsDiffer)
  })
  it('joins what a shared check disturbs in either list', () => {
    // In the school list the pool's checks are not there to be disturbed
    const only = (id: string) => lists.find(list => list.id === id)!
    const find = (checks: Check[]) => checks.find(check => check.id === 'gate-gap-below')!.disturbs
    const both = find(makeBasis(lineOf(aRun()), [only('school-grounds'), only('pool-adjacent')], []).checks)
    expect(new Set(both)).toEqual(new Set([...find(only('school-grounds').checks), ...find(only('pool-adjacent').checks)]))
  })
})

const settings = fc.uniqueArray(fc.constantFrom(...SETTINGS), { maxLength: 3 })
const someFace = fc.record({ settings, ground: fc.record({ finished: fc.boolean(), surface: fc.constantFrom('soft' as const, 'solid' as const) }) })
const someElement: fc.Arbitrary<LineElement> = fc.record({
  id: fc.uuid(), kind: fc.constantFrom(...ELEMENT_KINDS), work: fc.constantFrom(...WORKS), height: fc.integer({ min: 1, max: 900_000_000 }), topRail: fc.boolean(),
  bottom: fc.constantFrom('rail' as const, 'tensionWire' as const, 'none' as const), faces: fc.record({ outer: someFace, inner: someFace }),
  gate: fc.record({ form: fc.constantFrom(...GATE_FORMS), exit: fc.boolean(), selfClosing: fc.boolean(), automatic: fc.boolean() }),
}).map(({ gate, ...rest }) => elementSchema.parse({
  ...rest, tag: 'R1', length: 1, rise: 0, bays: 1,
  ...(rest.kind === 'gate' ? { gate: { ...gate, leaves: [1], hinge: 'start', opens: 'outer' } } : {}),
}))

describe('walkList', () => {
  const checks = makeBasis(lineOf(aRun()), lists, []).checks

  /** Plain reading of the rule, check by check and face by face (brute force beside the code's grouping of like elements). */
  function plainly(element: LineElement) {
    const facts = factsOf(element, 'imperial')
    return checks.filter(check => check.elements.includes(element.kind)).flatMap((check) => {
      const faces = FACES.filter(face => (check.settings.length === 0 || check.settings.some(setting => element.faces[face].settings.includes(setting)))
        && (check.when === undefined || compileCondition(check.when).holds(facts[face])))
      const asked = check.answeredFor === 'face' ? faces : faces.length > 0 ? [null] : []
      return asked.map(face => ({ element: element.id, check: check.id, face, limits: limitsInForce(check, element, face, [city]).limits.map(limit => limit.id) }))
        .filter(task => task.limits.length > 0 || check.unset !== 'leave')
        .map(task => check.asked === 'line' || (task.limits.length === 0 && check.unset === 'line') ? { ...task, line: true } : task)
    })
  }

  it('gives many elements together what a plain reading gives each alone', () => {
    fc.assert(fc.property(fc.array(someElement, { minLength: 1, maxLength: 6 }), (elements) => {
      expect(walkList(elements, checks, [city], 'imperial').tasks).toEqual(elements.flatMap(plainly))
    }), { numRuns: 40 })
  }, 30_000)
})

describe('a measure that hangs on a number', () => {
  const measure = (more: Partial<Check>): Check => ({ ...checks.find(check => check.id === 'gap-below')!, id: 'held-gap', limits: [], noLimit: { en: 'Ask.', es: 'Pregunte.' }, ...more })
  const { checks } = makeBasis(lineOf(aRun()), lists, [])
  const [pool, street] = [aRun({ inner: ['pool'] }, 1), aRun({ outer: ['walkway'] }, 2)]
  const tasksOf = (check: Check, provisions: Provision[]) => walkList([pool, street], [check], provisions, 'imperial').tasks

  it('is left out until somebody sets one, and then asked where it holds', () => {
    expect(tasksOf(measure({ unset: 'leave', concern: 'law' }), [])).toEqual([])
    expect(tasksOf(measure({ unset: 'leave', concern: 'law' }), [city])).toEqual([{ element: pool.id, check: 'held-gap', face: null, limits: ['city-gap'] }])
  })
  it('or is read once for the line where nobody did', () => {
    expect(tasksOf(measure({ unset: 'line' }), [city])).toEqual([{ element: pool.id, check: 'held-gap', face: null, limits: ['city-gap'] }, { element: street.id, check: 'held-gap', face: null, limits: [], line: true }])
  })
  it('is never left out where drowning, entrapment or an exit is at stake, nor read by bay and once for the line', () => {
    for (const concern of ['drowning', 'entrapment', 'exit'] as const) expect(checkSchema.safeParse(measure({ unset: 'leave', concern, class: 'correctFirst' })).success).toBe(false)
    expect(checkSchema.safeParse(measure({ unset: 'line', answeredFor: 'bay' })).success).toBe(false)
    expect(checkSchema.safeParse(measure({ asked: 'line', answeredFor: 'face' })).success).toBe(false)
    expect(checkSchema.safeParse({ ...checks.find(check => check.group && check.answeredFor === 'once')!, asked: 'line' }).success).toBe(false)
    expect(checkSchema.safeParse({ ...checks.find(check => check.method === 'look' && !check.group)!, unset: 'line' }).success).toBe(false)
  })
})

describe('tasksFor', () => {
  it('gives an element added in the field what the desk would have given it', () => {
    fc.assert(fc.property(someElement, (element) => {
      const desk = makeBasis(lineOf(element), lists, [city])
      const field = tasksFor(makeBasis(lineOf(aRun({ outer: ['school'] })), lists, [city]), element)
      expect(field.tasks).toEqual(desk.tasks)
      for (const [key, limit] of Object.entries(field.limits)) expect(desk.limits[key]).toEqual(limit)
      expect(Object.keys(field.limits).sort()).toEqual([...new Set(desk.tasks.flatMap(task => task.limits))].sort())
    }), { numRuns: 25 })
  }, 30_000)
})
