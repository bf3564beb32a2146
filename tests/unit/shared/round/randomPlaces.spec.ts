import { describe, expect, it } from 'vitest'
import { randomPlaces } from '#shared/round/randomPlaces'
import { basisOf, CHECKS, element, RUN, RUN2, uuid } from '../../../helpers/roundStory'

const snug = { ...CHECKS.closing!, id: 'tie-snug', sampled: true, elements: ['run' as const], class: 'ownerMayAccept' as const, concern: 'workmanship' as const, finding: 'loosePart' as const }
/** Two runs of fifty bays: a hundred places. */
const elements = [element(RUN, 'R1', { bays: 50 }), element(RUN2, 'R2', { bays: 50 })]
const line = { version: 1, system: 'imperial' as const, sides: [{ key: 'A', name: 'North', elements }] }
const basis = basisOf({ line, checks: [snug, CHECKS.gap!], tasks: elements.map(one => ({ element: one.id, check: 'tie-snug', face: null, limits: [], line: true as const })) })

describe('random places to try', () => {
  const drawn = randomPlaces(basis, line, 'tie-snug', uuid(3, 1))
  it('are 39 of a hundred, each once, along the walk', () => {
    // arithmetic.md 3: N = 100, 5 %, 95 %: 39
    expect(drawn).toHaveLength(39)
    const at = drawn.map(({ element: id, bay }) => (id === RUN ? 0 : 50) + bay)
    expect(new Set(at).size).toBe(39)
    expect(at).toEqual([...at].sort((a, b) => a - b))
    expect(Math.max(...drawn.map(one => one.bay))).toBeLessThanOrEqual(50)
  })
  it('are the same on every device, and others on another round', () => {
    expect(randomPlaces(basis, line, 'tie-snug', uuid(3, 1))).toEqual(drawn)
    expect(randomPlaces(basis, line, 'tie-snug', uuid(3, 2))).not.toEqual(drawn)
  })
  it('fall on every bay about as often, over many rounds', () => {
    // 400 rounds of 39 in 100: expected 156 a bay, standard deviation under 9.8 (binomial); six of them either way
    const counts = new Array<number>(100).fill(0)
    for (let n = 0; n < 400; n++) for (const one of randomPlaces(basis, line, 'tie-snug', uuid(9, n))) counts[(one.element === RUN ? 0 : 50) + one.bay - 1]!++
    expect(Math.min(...counts)).toBeGreaterThan(156 - 59)
    expect(Math.max(...counts)).toBeLessThan(156 + 59)
  })
  it('are none for a check that is not sampled', () => {
    expect(randomPlaces(basis, line, 'gap-below', uuid(3, 1))).toEqual([])
  })
})
