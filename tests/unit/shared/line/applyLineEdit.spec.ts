import { describe, expect, it } from 'vitest'
import type { LineEdit } from '#shared/line/applyLineEdit'
import { applyLineEdit, editLine } from '#shared/line/applyLineEdit'
import { lineSchema } from '#shared/line/line'
import { INCH } from '#shared/measure/length'
import { basisOf, element, GATE, RUN, RUN2, uuid } from '../../../helpers/roundStory'

const { line } = basisOf()
const tags = (edit: LineEdit, on = line) => applyLineEdit(on, edit).sides[0]!.elements.map(one => one.tag)
const refusal = (edit: LineEdit, on = line) => {
  try {
    applyLineEdit(on, edit)
  }
  catch (error) {
    return (error as { code: string }).code
  }
  return 'none'
}
const add = (tag: string, after: string | null, side = 'A', id = uuid(7, 9)): LineEdit => ({ kind: 'add', after, side, element: element(id, tag) })
const split = (first: number, second: number, tag = 'R3', id = uuid(7, 9)): LineEdit => ({ kind: 'split', element: RUN, into: [element(RUN, 'R1', { length: first * INCH, bays: 2 }), element(id, tag, { length: second * INCH, bays: 2 })] })

describe('editing a line in the field', () => {
  it('adds an element at the head of a side or after another', () => {
    expect(tags(add('R3', null))).toEqual(['R3', 'R1', 'G1', 'R2'])
    expect(tags(add('R3', GATE))).toEqual(['R1', 'G1', 'R3', 'R2'])
  })

  it('splits a run into two that are together as long, keeping the id of the first', () => {
    const edited = applyLineEdit(line, split(300, 180))
    expect(edited.sides[0]!.elements.map(one => [one.id, one.tag, one.length / INCH])).toEqual([[RUN, 'R1', 300], [uuid(7, 9), 'R3', 180], [GATE, 'G1', 48], [RUN2, 'R2', 480]])
  })

  it('renames, re-measures and strikes', () => {
    expect(tags({ kind: 'rename', element: RUN, tag: 'R9', name: '' })).toEqual(['R9', 'G1', 'R2'])
    const measured = applyLineEdit(line, { kind: 'remeasure', element: RUN, length: INCH, height: 2 * INCH, rise: -INCH, bays: 7 })
    expect(measured.sides[0]!.elements[0]).toMatchObject({ id: RUN, length: INCH, height: 2 * INCH, rise: -INCH, bays: 7, tag: 'R1' })
    expect(tags({ kind: 'strike', element: GATE, reason: 'Drawn twice' })).toEqual(['R1', 'R2'])
  })

  it('leaves the line that it was given, and what it does not touch, as they were', () => {
    const before = structuredClone(line)
    const edited = applyLineEdit(line, { kind: 'rename', element: RUN, tag: 'R9', name: 'Along the court' })
    expect(line).toEqual(before)
    expect(edited.sides[0]!.elements[1]).toBe(line.sides[0]!.elements[1])
    expect(lineSchema.parse(edited)).toEqual(edited)
  })

  it('says what a person should put right first', () => {
    expect(refusal(add('R2', null))).toBe('tagTaken')
    expect(refusal(add('R3', uuid(7, 77)))).toBe('noSuchElement')
    expect(refusal(add('R3', null, 'Q'))).toBe('noSuchSide')
    expect(refusal(add('R3', null, 'A', RUN))).toBe('idTaken')
    expect(refusal(split(300, 179))).toBe('otherLength')
    expect(refusal(split(300, 180, 'G1'))).toBe('tagTaken')
    expect(refusal(split(300, 180, 'R1'))).toBe('tagTaken')
    expect(refusal({ kind: 'rename', element: RUN, tag: 'G1', name: '' })).toBe('tagTaken')
    expect(refusal({ kind: 'rename', element: RUN, tag: 'R1', name: 'Along the court' })).toBe('none')
    expect(refusal({ kind: 'strike', element: uuid(7, 77), reason: 'Gone' })).toBe('noSuchElement')
    const one = { ...line, sides: [{ ...line.sides[0]!, elements: [element(RUN, 'R1')] }] }
    expect(refusal({ kind: 'strike', element: RUN, reason: 'Gone' }, one)).toBe('lastOfSide')
  })

  it('drops nothing that was entered already for a tag or a length', () => {
    expect(editLine(line, add('R2', null)).sides[0]!.elements.map(one => one.tag)).toEqual(['R2', 'R1', 'G1', 'R2'])
    expect(editLine(line, split(300, 179)).sides[0]!.elements).toHaveLength(4)
  })
})
