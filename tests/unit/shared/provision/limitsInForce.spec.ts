import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { Check } from '#shared/checklist/check'
import type { Bound, Limit } from '#shared/limit/limit'
import type { Setting } from '#shared/line/line'
import { isLooser, limitsInForce } from '#shared/provision/limitsInForce'
import { provisionSchema } from '#shared/provision/provision'
import type { Provision } from '#shared/provision/provision'
import { readBuiltIn } from '#server/services/checklist/readBuiltIn'
import { aGate, aRun } from '../../../fixtures/subjects/elements'

const checks = new Map(readBuiltIn().flatMap(list => list.checks).map(check => [check.id, check]))
const check = (id: string) => checks.get(id)!
const INCH = 8_128_000
const inches = (figure: number, inclusive = true): Bound => ({ imperial: figure * INCH, inclusive })

const provision = (over: Partial<Provision> & { low?: Bound, high?: Bound, datum?: string }): Provision => {
  const { low = null, high = null, datum = 'ground', ...rest } = over
  return {
    id: 'p1', kind: 'authority', measurand: 'gap-below', setting: null, effect: 'replace',
    limit: { datum, unit: 'length', low, high, avoid: null },
    name: 'City of Example', citation: '12.4', confirmedBy: 'A. Clerk', confirmedOn: '2026-11-02', ...rest,
  }
}
const ids = (limits: Limit[]) => limits.map(limit => limit.id)

describe('limitsInForce', () => {
  const pool = aRun({ outer: ['walkway'], inner: ['pool'], ground: 'soft' })

  it('takes the built-in limit of the setting and ground, with its basis', () => {
    const force = limitsInForce(check('gap-below'), pool, null, [])
    expect(force.limits).toHaveLength(1)
    expect(force.limits[0]).toMatchObject({ id: 'A07.gap-below.ground', high: { imperial: 2 * INCH }, basis: { kind: 'builtIn', fact: 'A07' } })
    expect(force.limits[0]).not.toHaveProperty('when')
    expect(ids(limitsInForce(check('gap-below'), aRun({ inner: ['pool'], ground: 'solid' }), null, []).limits)).toEqual(['A06.gap-below.ground'])
    expect(limitsInForce(check('gap-below'), aRun({ inner: ['school'] }), null, []).limits).toEqual([])
  })
  it('holds both grounds where the two faces differ, so that the strictest governs', () => {
    const mixed = aRun({ inner: ['pool'] })
    mixed.faces.outer.ground.surface = 'solid'
    expect(ids(limitsInForce(check('gap-below'), mixed, null, []).limits).sort()).toEqual(['A06.gap-below.ground', 'A07.gap-below.ground'])
  })
  it('lets an authority replace, and says what stood there', () => {
    const force = limitsInForce(check('gap-below'), pool, null, [provision({ high: inches(3) })])
    expect(ids(force.limits)).toEqual(['p1'])
    expect(force.limits[0]!.basis).toEqual({ kind: 'authority', name: 'City of Example', citation: '12.4', confirmedBy: 'A. Clerk', confirmedOn: '2026-11-02' })
    expect(force.setAside).toMatchObject([{ limit: { id: 'A07.gap-below.ground' }, by: 'p1', why: 'replaced' }])
  })
  it('does not let a specification loosen what entrapment asks, and says so', () => {
    const force = limitsInForce(check('gap-below'), pool, null, [provision({ kind: 'specification', high: inches(3) })])
    expect(ids(force.limits)).toEqual(['A07.gap-below.ground', 'p1'])
    expect(force.notLoosened).toEqual([{ provision: 'p1', limit: 'A07.gap-below.ground' }])
  })
  it('lets a specification replace a figure of workmanship', () => {
    const force = limitsInForce(check('post-spacing'), aRun(), null, [provision({ kind: 'specification', measurand: 'line-post-spacing', datum: 'centre-to-centre', high: inches(96) })])
    expect(ids(force.limits)).toEqual(['p1'])
  })
  it('puts a limit of another datum on the check of that datum, and the replaced one aside on its own', () => {
    // A city that counts 54 in from the ground: the leaf check keeps no number, the ground check gets it
    const gate = aGate({}, { inner: ['pool'] })
    const city = provision({ measurand: 'latch-release-height', datum: 'ground', low: inches(54), setting: 'pool' })
    const leaf = limitsInForce(check('latch-height-leaf'), gate, null, [city])
    const ground = limitsInForce(check('latch-height-ground'), gate, null, [city])
    expect(leaf.limits).toEqual([])
    expect(leaf.setAside).toMatchObject([{ limit: { id: 'A25.latch-release-height.bottom-of-leaf' }, by: 'p1' }])
    expect(ids(ground.limits)).toEqual(['p1'])
  })
  it('keeps a local number to its setting and its condition', () => {
    const away = provision({ high: inches(3), setting: 'playground' })
    expect(ids(limitsInForce(check('gap-below'), pool, null, [away]).limits)).toEqual(['A07.gap-below.ground'])
    const solid = provision({ high: inches(3), when: 'face.ground.surface == "solid"' })
    expect(ids(limitsInForce(check('gap-below'), pool, null, [solid]).limits)).toEqual(['A07.gap-below.ground'])
  })
  it('lets the stricter of two stand', () => {
    const looser = limitsInForce(check('gap-below'), pool, null, [provision({ effect: 'stricterOf', high: inches(3) })])
    expect([ids(looser.limits), looser.setAside.map(one => one.limit.id)]).toEqual([['A07.gap-below.ground'], ['p1']])
    const stricter = limitsInForce(check('gap-below'), pool, null, [provision({ effect: 'stricterOf', high: inches(1) })])
    expect([ids(stricter.limits), stricter.setAside.map(one => one.limit.id)]).toEqual([['p1'], ['A07.gap-below.ground']])
  })
  it('lets both stand where one prints inches and the other millimetres alone', () => {
    const metric = provision({ effect: 'stricterOf', high: { metric: 50 * 320_000, inclusive: true } })
    expect(ids(limitsInForce(check('gap-below'), pool, null, [metric]).limits)).toEqual(['A07.gap-below.ground', 'p1'])
  })
  it('names a provision with a note, and makes no limit of it', () => {
    const note = { ...provision({ effect: 'add' }), limit: null, note: 'Ask before anything is drilled.' }
    const force = limitsInForce(check('gap-below'), pool, null, [note])
    expect([ids(force.limits), force.notes]).toEqual([['A07.gap-below.ground'], ['p1']])
  })
  it('gives an accessible gate beside a pool both ends, which then clash in the open', () => {
    // 2010 ADA 404.2.7 exc. 2: at most 54 in from the ground; IBC 2006 3109.4.1.7: at least 54 in from the bottom of the leaf
    const gate = aGate({}, { outer: ['accessibleRoute'], inner: ['pool'] })
    expect(ids(limitsInForce(check('latch-height-ground'), gate, null, []).limits)).toEqual(['C04.latch-release-height.ground'])
    expect(ids(limitsInForce(check('latch-height-leaf'), gate, null, []).limits)).toEqual(['A25.latch-release-height.bottom-of-leaf'])
  })
})

/** Whether an amount in inches or millimetres units meets a limit: our own plain reading, beside the code's comparison of ends. */
function meets(amount: number, limit: Limit, system: 'imperial' | 'metric'): boolean {
  const over = (bound: Bound | null) => !bound || bound[system] === undefined || (bound.inclusive ? amount >= bound[system] : amount > bound[system])
  const under = (bound: Bound | null) => !bound || bound[system] === undefined || (bound.inclusive ? amount <= bound[system] : amount < bound[system])
  const inBand = limit.avoid !== null && limit.avoid.low[system] !== undefined && limit.avoid.high[system] !== undefined
    && (limit.avoid.low.inclusive ? amount >= limit.avoid.low[system] : amount > limit.avoid.low[system])
    && (limit.avoid.high.inclusive ? amount <= limit.avoid.high[system] : amount < limit.avoid.high[system])
  return over(limit.low) && under(limit.high) && !inBand
}

const amounts = Array.from({ length: 9 }, (_, at) => at - 1)
const bound = fc.record({ imperial: fc.integer({ min: 0, max: 5 }), metric: fc.option(fc.integer({ min: 0, max: 5 }), { nil: undefined, freq: 1 }), inclusive: fc.boolean() })
  .map(({ imperial, metric, inclusive }): Bound => ({ imperial, ...(metric === undefined ? {} : { metric }), inclusive }))
const ends = fc.record({ low: fc.option(bound), high: fc.option(bound), avoid: fc.option(fc.record({ low: bound, high: bound })) })
const limitFrom = (id: string, of: Pick<Limit, 'low' | 'high' | 'avoid'>): Limit => ({ id, measurand: 'm', datum: 'ground', unit: 'length', ...of, basis: { kind: 'builtIn', name: id } })

describe('isLooser', () => {
  it('is right whenever it says so: what meets the stricter meets the looser, in either system', () => {
    let told = 0
    fc.assert(fc.property(ends, ends, (one, other) => {
      const [a, b] = [limitFrom('a', one), limitFrom('b', other)]
      if (!isLooser(a, b)) return
      told++
      for (const system of ['imperial', 'metric'] as const) for (const amount of amounts) if (meets(amount, b, system)) expect(meets(amount, a, system)).toBe(true)
    }), { numRuns: 3000 })
    expect(told).toBeGreaterThan(30)
  }, 30_000)
  it('says so of a limit and itself', () => {
    fc.assert(fc.property(ends, one => isLooser(limitFrom('a', one), limitFrom('b', one))))
  })
})

const someProvisions = fc.uniqueArray(fc.record({
  id: fc.constantFrom('p1', 'p2', 'p3', 'p4'),
  kind: fc.constantFrom('authority' as const, 'specification' as const, 'organisation' as const),
  effect: fc.constantFrom('replace' as const, 'add' as const, 'stricterOf' as const),
  setting: fc.constantFrom<(Setting | null)[]>(null, 'pool', 'school'),
  datum: fc.constantFrom('ground', 'elsewhere'),
  ends,
}), { selector: one => one.id, maxLength: 4 }).map(list => list.map(({ id, kind, effect, setting, datum, ends: of }): Provision => ({
  ...provision({ id, kind, effect, setting }), measurand: 'm', limit: { datum, unit: 'length', ...of },
})))
const someCheck = fc.record({ concern: fc.constantFrom('entrapment' as const, 'workmanship' as const), limits: fc.array(ends, { maxLength: 2 }) }).map(({ concern, limits }): Check => ({
  ...check('gap-below'), measurand: 'm', concern, limits: limits.map((of, at) => limitFrom(`b${at}`, of)),
}))

describe('limits in force, for any check and local numbers', () => {
  const element = aRun({ inner: ['pool'] })
  const run = (of: Check, provisions: Provision[]) => limitsInForce(of, element, null, provisions)
  const allMeet = (limits: Limit[], amount: number) => limits.every(limit => meets(amount, limit, 'imperial'))

  it('do not depend on the order of the local numbers', () => {
    fc.assert(fc.property(someCheck, someProvisions, (of, provisions) => {
      expect(run(of, [...provisions].reverse())).toEqual(run(of, provisions))
    }))
  })
  it('lose nothing: each limit that would have held stands or is named as set aside, once', () => {
    fc.assert(fc.property(someCheck, someProvisions, (of, provisions) => {
      const { limits, setAside } = run(of, provisions)
      const wanted = [...of.limits.map(limit => limit.id), ...provisions.filter(one => one.setting !== 'school' && one.limit!.datum === 'ground').map(one => one.id)]
      expect([...ids(limits), ...setAside.map(one => one.limit.id)].sort()).toEqual(wanted.sort())
      for (const { by, limit } of setAside) {
        expect(by).not.toBe(limit.id)
        expect([...of.limits.map(one => one.id), ...provisions.map(one => one.id)]).toContain(by)
      }
    }))
  })
  it('are never looser than the built-in ones where lives hang on them, unless an authority says so', () => {
    fc.assert(fc.property(someCheck, someProvisions, (of, provisions) => {
      const grave: Check = { ...of, concern: 'drowning' }
      const { limits } = run(grave, provisions.filter(one => one.kind !== 'authority'))
      for (const amount of amounts) if (allMeet(limits, amount)) expect(allMeet(grave.limits, amount)).toBe(true)
    }))
  })
  it('meet exactly what all limits together meet, when nothing is replaced', () => {
    fc.assert(fc.property(someCheck, someProvisions, (of, provisions) => {
      const beside = provisions.map((one): Provision => one.effect === 'replace' ? { ...one, effect: 'add' } : one)
      const { limits, setAside } = run(of, beside)
      const all = [...limits, ...setAside.map(one => one.limit)]
      for (const amount of amounts) expect(allMeet(limits, amount)).toBe(allMeet(all, amount))
    }))
  })
  it('only ever grow by "add"', () => {
    fc.assert(fc.property(someCheck, someProvisions, (of, provisions) => {
      const { limits, setAside } = run(of, provisions.map((one): Provision => ({ ...one, effect: 'add' })))
      expect(setAside).toEqual([])
      expect(ids(limits)).toEqual(expect.arrayContaining(of.limits.map(limit => limit.id)))
    }))
  })
})

describe('provisionSchema', () => {
  const good = provision({ high: inches(3) })
  it('takes a number with whose it is, who confirmed it and when', () => {
    expect(provisionSchema.safeParse(good).success).toBe(true)
  })
  it.each([
    ['neither number nor note', { limit: null }],
    ['a note that would replace', { limit: null, note: 'Ask first.', effect: 'replace' }],
    ['a number without an end', { limit: { ...good.limit!, high: null } }],
    ['a review before the confirmation', { reviewOn: '2026-01-01' }],
    ['no citation', { citation: '' }],
    ['nobody who confirmed it', { confirmedBy: ' ' }],
    ['a key that is not known', { colour: 'red' }],
  ])('refuses %s', (_, over) => {
    expect(provisionSchema.safeParse({ ...good, ...over }).success).toBe(false)
  })
})
