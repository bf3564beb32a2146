import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { applyLineEdit } from '#shared/line/applyLineEdit'
import { newElement, newLine } from '#shared/line/editLine'
import { elementSchema } from '#shared/line/line'
import { FOOT, INCH } from '#shared/measure/length'
import { splitRun } from '~/offline/splitRun'

const run = (more = {}) => ({ ...newElement('run', { id: '018f0000-0000-7000-8000-0000000000e0', system: 'imperial', taken: new Set() }), length: 84 * FOOT, rise: 11 * INCH, bays: 9, ...more })

describe('a run made two', () => {
  it('shares length, rise and bays out: 28 ft of 84 ft are a third, 3 of 9 bays', () => {
    const [first, second] = splitRun(run({ rise: 12 * INCH }), 28 * FOOT)
    expect([first.length, first.bays, first.rise]).toEqual([28 * FOOT, 3, 4 * INCH])
    expect([second.length, second.bays, second.rise]).toEqual([56 * FOOT, 6, 8 * INCH])
  })
  it('loses nothing, leaves each part a bay, and is an edit that the line takes', () => {
    fc.assert(fc.property(fc.integer({ min: 2, max: 400 * FOOT }), fc.integer({ min: -50 * FOOT, max: 50 * FOOT }), fc.integer({ min: 1, max: 500 }), fc.double({ min: 0, max: 1, noNaN: true }), (length, rise, bays, share) => {
      const whole = run({ length, rise, bays })
      const [first, second] = splitRun(whole, Math.min(length - 1, Math.max(1, Math.round(length * share))))
      expect([first.length + second.length, first.rise + second.rise]).toEqual([length, rise])
      if (bays > 1) expect(first.bays + second.bays).toBe(bays)
      for (const part of [first, second]) expect(elementSchema.safeParse(part).success).toBe(true)
      const line = { ...newLine('imperial', () => whole.id), sides: [{ key: 'A', name: '', elements: [whole] }] }
      const edited = applyLineEdit(line, { kind: 'split', element: whole.id, into: [first, { ...second, id: '018f0000-0000-7000-8000-0000000000e1', tag: 'R9' }] })
      expect(edited.sides[0]!.elements.map(element => element.tag)).toEqual([whole.tag, 'R9'])
    }))
  })
  it.each([0, -1, 84 * FOOT, 90 * FOOT])('refuses %i, which is not between its ends', (at) => {
    expect(() => splitRun(run(), at)).toThrow(RangeError)
  })
})
