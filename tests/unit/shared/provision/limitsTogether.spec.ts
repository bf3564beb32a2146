import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { bottomClearanceRange } from '#shared/gate/bottomClearanceRange'
import { DEGREE } from '#shared/gate/leaf'
import { combineLimits } from '#shared/limit/combineLimits'
import { judge } from '#shared/limit/judge'
import type { Bound, Limit } from '#shared/limit/limit'
import type { Line, LineElement } from '#shared/line/line'
import { INCH } from '#shared/measure/length'
import { datumOverDatum } from '#shared/provision/datumOverDatum'
import { leafOverGround } from '#shared/provision/leafOverGround'
import { limitsTogether } from '#shared/provision/limitsTogether'
import type { Provision } from '#shared/provision/provision'
import { makeBasis } from '#shared/round/makeBasis'
import { readBuiltIn } from '#server/services/checklist/readBuiltIn'
import { aGate, aRun } from '../../../fixtures/subjects/elements'

const lineOf = (...elements: LineElement[]): Line => ({ version: 1, system: 'imperial', sides: [{ key: 'A', name: 'North', elements }] })
const together = (elements: LineElement[], provisions: Provision[] = []) => limitsTogether(makeBasis(lineOf(...elements), readBuiltIn(), provisions))
const inches = (figure: number, inclusive = true): Bound => ({ imperial: figure * INCH, inclusive })
const provision = (id: string, measurand: string, datum: string, ends: { low?: Bound, high?: Bound }, over: Partial<Provision> = {}): Provision => ({
  id, kind: 'authority', measurand, setting: null, effect: 'add', limit: { datum, unit: 'length', low: null, high: null, avoid: null, ...ends },
  name: 'Town of Example', citation: '3.1', confirmedBy: 'A. Clerk', confirmedOn: '2026-11-02', ...over,
})
const of = (found: ReturnType<typeof together>, measurand: string) => found.measurands.filter(one => one.measurand === measurand)
const poolGate = aGate({}, { inner: ['pool'], outer: ['accessibleRoute'] })

describe('limits that stand together, by the published texts (templates/facts)', () => {
  it('pool latch (A25, 54 in over the bottom of the leaf) and reach of a pool gate (C04, 54 in over the ground) meet only with no gap under the leaf (A07 allows 2 in)', () => {
    const [latch] = of(together([poolGate]), 'latch-release-height')
    expect(latch).toMatchObject({
      state: 'hangs', class: 'outOfUse', checks: ['latch-height-ground', 'latch-height-leaf'], apart: [],
      joined: { upper: 'bottom-of-leaf', lower: 'ground', gap: { from: 0, to: 2 * INCH }, gapBy: ['A07.gap-below.ground'], works: { from: 0, to: 0 }, at: 2 * INCH },
    })
    expect(latch!.joined!.clashes).toEqual([{ kind: 'apart', low: 'A25.latch-release-height.bottom-of-leaf', high: 'C04.latch-release-height.ground', by: 2 * INCH }])
    expect(latch!.byDatum.map(one => [one.datum, one.windows[0]!.low?.amount ?? null, one.windows[0]!.high?.amount ?? null])).toEqual([['bottom-of-leaf', 54 * INCH, null], ['ground', null, 54 * INCH]])
  })
  it('a clearance that is asked through the swing makes of it a clash, by just that clearance', () => {
    const [latch] = of(together([poolGate], [provision('swing', 'swing-clearance', 'ground-through-swing', { low: inches(0.5) })]), 'latch-release-height')
    expect(latch).toMatchObject({ state: 'clash', joined: { works: null, at: INCH / 2, clashes: [{ by: INCH / 2 }], gapBy: ['A07.gap-below.ground', 'swing'] } })
  })
  it('off the pool the reach is 34 to 48 in (C03); 54 in that an authority adds clashes with it by 6 in', () => {
    const gate = aGate({}, { outer: ['accessibleRoute'] })
    expect(of(together([gate]), 'latch-release-height')).toMatchObject([{ state: 'window', byDatum: [{ windows: [{ low: { amount: 34 * INCH }, high: { amount: 48 * INCH, limits: ['C03.latch-release-height.ground'] } }] }] }])
    const [clash] = of(together([gate], [provision('up', 'latch-release-height', 'ground', { low: inches(54) })]), 'latch-release-height')
    expect(clash).toMatchObject({ state: 'clash', joined: null, byDatum: [{ windows: [], clashes: [{ low: 'up', high: 'C03.latch-release-height.ground', by: 6 * INCH }] }] })
  })
  it('the 4 in sphere (A08) and the band that holds a head (B01, over 3 1/2 and under 9 in) leave up to 3 1/2 in, by the band', () => {
    const [opening] = of(together([aRun({ inner: ['pool'], outer: ['school'] })]), 'opening')
    expect(opening).toMatchObject({ state: 'window', weaker: ['A08.opening.between-faces'] })
    expect(opening!.byDatum[0]!.windows).toEqual([{ low: null, high: { amount: 3.5 * INCH, inclusive: true, limits: ['B01.opening.between-faces'] } }])
  })
  it('2 in over soft ground (A07) cannot be kept by a level 4 ft leaf where the ground rises 5 in under it: 3 in short, from either end', () => {
    for (const [rise, hinge, low, high] of [[5, 'start', 5, 2], [-5, 'end', 5, 2], [-5, 'start', 0, -3], [5, 'end', 0, -3]] as const) {
      const { leaves } = together([{ ...aGate({ hinge }, { inner: ['pool'] }), rise: rise * INCH }])
      expect(leaves).toMatchObject([{ leaf: 0, closedBy: ['A07.gap-below.ground'], swingBy: [], margin: 0, range: { window: null, low: low * INCH, high: high * INCH, shortBy: 3 * INCH } }])
    }
    expect(together([poolGate]).leaves).toEqual([])
  })
  it('sees that each leaf of a double gate hangs at its own end', () => {
    const leaf = 2 * 12 * INCH
    const { leaves } = together([{ ...aGate({ form: 'doubleSwing', leaves: [leaf, leaf] }, { inner: ['pool'] }), rise: 4 * INCH }])
    // Two feet of a gate of four: half of the rise lies under each leaf. Up from its hinge 2 in are asked at least, down from it 0 at most: only the very figure is left.
    expect(leaves.map(({ leaf, range }) => [leaf, range.low, range.high])).toEqual([[0, 2 * INCH, 2 * INCH], [1, 0, 0]])
  })
})

describe('limits that stand together', () => {
  it('tells places that are alike once, clashes first and what nobody has set last', () => {
    const runs = Array.from({ length: 60 }, (_, at) => aRun({ inner: ['pool'] }, at + 1))
    const found = together([...runs, { ...poolGate, id: aRun({}, 90).id }], [provision('up', 'clear-width', 'leaf-face-to-stop', { high: inches(20) })])
    expect(of(found, 'gap-below')).toMatchObject([{ places: [...runs, { id: aRun({}, 90).id }].map(({ id }) => ({ element: id, face: null })) }])
    expect(found.measurands[0]).toMatchObject({ measurand: 'clear-width', state: 'clash' })
    const states = found.measurands.map(one => one.state)
    expect([...states].sort((one, other) => ['clash', 'hangs', 'window', 'unset'].indexOf(one) - ['clash', 'hangs', 'window', 'unset'].indexOf(other))).toEqual(states)
    expect(found.measurands.find(one => one.measurand === 'gap-below-pushed')).toMatchObject({ state: 'unset', limits: [], byDatum: [] })
  })
  it('says what was set aside, what a specification could not loosen, and what binds nothing', () => {
    const gate = [aGate({}, { inner: ['pool'] })]
    const [replaced] = of(together(gate, [provision('town', 'gap-below', 'ground', { high: inches(3) }, { effect: 'replace' })]), 'gap-below')
    expect(replaced).toMatchObject({ limits: ['town'], weaker: [], setAside: [{ limit: { id: 'A07.gap-below.ground' }, by: 'town', why: 'replaced' }], notLoosened: [] })
    const [kept] = of(together(gate, [provision('spec', 'gap-below', 'ground', { high: inches(3) }, { effect: 'replace', kind: 'specification' })]), 'gap-below')
    expect(kept).toMatchObject({ limits: ['A07.gap-below.ground', 'spec'], weaker: ['spec'], setAside: [], notLoosened: [{ provision: 'spec', limit: 'A07.gap-below.ground' }] })
  })
  it('lets a gap that nobody limits stay open, and still tells what no gap can mend', () => {
    const gate = aGate({}, { inner: ['pool'], outer: ['accessibleRoute'] })
    const away = [provision('any', 'gap-below', 'ground', { low: inches(0) }, { effect: 'replace' }), provision('low', 'latch-release-height', 'ground', { high: inches(48) })]
    expect(of(together([gate], away), 'latch-release-height')).toMatchObject([{ state: 'clash', joined: { gap: { from: 0, to: null }, works: null, at: 0, clashes: [{ by: 6 * INCH }] } }])
  })
})

describe('windows, against what the walk would say of each reading', () => {
  const half = fc.integer({ min: 0, max: 14 }).map(halves => ({ imperial: halves * INCH / 2, inclusive: true }))
  const local = fc.record({ low: fc.option(half), high: fc.option(half), kind: fc.constantFrom('organisation' as const, 'specification' as const, 'authority' as const), effect: fc.constantFrom('replace' as const, 'add' as const, 'stricterOf' as const) })
    .filter(({ low, high }) => low !== null || high !== null)
  it('hold just the readings that conform, whatever local numbers say', () => {
    fc.assert(fc.property(fc.array(local, { maxLength: 4 }), (numbers) => {
      const basis = makeBasis(lineOf(aRun({ inner: ['pool'] })), readBuiltIn(), numbers.map(({ low, high, ...over }, at) => provision(`p${at}`, 'gap-below', 'ground', { ...(low && { low }), ...(high && { high }) }, over)))
      const [gap] = of(limitsTogether(basis), 'gap-below')
      const held = gap!.limits.map(key => basis.limits[key]!)
      for (let quarter = 0; quarter <= 32; quarter++) {
        const amount = quarter * INCH / 4
        const inside = gap!.byDatum.some(({ windows }) => windows.some(({ low, high }) => (!low || amount >= low.amount) && (!high || amount <= high.amount)))
        expect(inside).toBe(judge({ amount, system: 'imperial' }, held).verdict === 'conforms')
      }
      expect(gap!.state).toBe(gap!.byDatum[0]!.windows.length > 0 ? 'window' : 'clash')
    }), { numRuns: 40 })
  })
})

describe('a best case that is never too good', () => {
  // OWN: the same leaf over ground that also rises or falls across the line.
  const slope = fc.integer({ min: -12, max: 12 }).map(eighths => eighths * INCH)
  it('finds no clash that some cross slope would undo, and no range that some cross slope would widen', () => {
    fc.assert(fc.property(slope, slope, fc.integer({ min: 0, max: 4 }), fc.integer({ min: 0, max: 6 }), fc.constantFrom('start' as const, 'end' as const), (rise, across, margin, most, hinge) => {
      const gate = { ...aGate({ hinge }), rise }
      const [told] = leafOverGround(gate, margin * INCH, most * INCH)
      const along = { rise: hinge === 'start' ? rise : 0 - rise, over: gate.length }
      const real = bottomClearanceRange({ width: gate.gate!.leaves[0]!, margin: margin * INCH, closedAtMost: most * INCH, to: 90 * DEGREE }, { plane: { along, across: { rise: across, over: gate.length } } })
      expect(told!.range.low).toBeLessThanOrEqual(real.low)
      expect(told!.range.high).toBe(real.high)
      if (!told!.range.window) expect(real.window).toBeNull()
    }))
  })
  it('says nothing of gates that do not swing, or are drawn steeper than 1 in 1', () => {
    expect(leafOverGround(aGate({ form: 'slide' }), 0, INCH)).toEqual([])
    expect(leafOverGround({ ...aGate(), rise: aGate().length + 1 }, 0, INCH)).toEqual([])
    expect(leafOverGround(aRun(), 0, INCH)).toEqual([])
  })
})

// OWN: every gap is tried. Whole units of a measure that knows fractions: an excluded end is one that the other side may come up to.
const end = fc.integer({ min: -6, max: 6 })
const closing = fc.record({ low: fc.option(end), high: fc.option(end), lowIn: fc.boolean(), highIn: fc.boolean() })
const banding = fc.record({ from: end, span: fc.nat(4) })
const some = fc.record({ datum: fc.constantFrom('leaf', 'ground'), of: fc.oneof(closing, banding) }).map(({ datum, of: parts }) => ({
  datum,
  low: 'span' in parts || parts.low === null ? null : { metric: parts.low, inclusive: parts.lowIn },
  high: 'span' in parts || parts.high === null ? null : { metric: parts.high, inclusive: parts.highIn },
  avoid: 'span' in parts ? { low: { metric: parts.from, inclusive: false }, high: { metric: parts.from + parts.span, inclusive: false } } : null,
}))

describe('datums that lie over each other, against trying every gap', () => {
  it('finds the least and greatest gap that work, and whether all do', () => {
    fc.assert(fc.property(fc.array(some, { minLength: 2, maxLength: 5 }), fc.integer({ min: 0, max: 6 }), fc.option(fc.integer({ min: 0, max: 10 })), (parts, from, span) => {
      const limits = parts.map((one, at): Limit => ({ id: `k${at}`, measurand: 'm', unit: 'length', basis: { kind: 'builtIn', name: 'made up for this test' }, ...one }))
      // 60 lies past every meeting of figures between -6 and 10.
      const gaps = Array.from({ length: (span ?? 60) + 1 }, (_, step) => from + step)
      const working = gaps.filter(gap => combineLimits(limits, { datum: 'ground', offsets: { leaf: gap }, system: 'metric' }).windows.length > 0)
      const found = datumOverDatum(limits, 'leaf', 'ground', { from, to: span === null ? null : from + span }, 'metric')
      expect(found.always).toBe(working.length === gaps.length)
      expect(found.works).toEqual(working.length === 0 ? null : { from: working[0], to: span === null && working.at(-1) === gaps.at(-1) ? null : working.at(-1) })
      expect(found.clashes.length > 0).toBe(!found.always)
    }), { numRuns: 400 })
  })
})
