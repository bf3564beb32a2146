import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { addElement, addSide, changeElement, changeKind, changeLength, facesForAll, moveElement, newLine, removeElement, renameSide } from '#shared/line/editLine'
import { checkLine } from '#shared/line/checkLine'
import { ELEMENT_KINDS, elementsOf, lineSchema, type Line } from '#shared/line/line'
import { FOOT } from '#shared/measure/length'
import { anyLine } from '~~/tests/fixtures/line/anyLine'
import { gate, run, schoolLine } from '~~/tests/fixtures/line/schoolLine'

let made = 0
const newId = () => `0193d000-0000-7000-8000-${String(++made).padStart(12, '0')}`
const tags = (line: Line) => line.sides.map(side => side.elements.map(element => element.tag).join(' '))
const of = (tag: string) => elementsOf(schoolLine).find(element => element.tag === tag)!

describe('editing a line at the desk', () => {
  it('begins with one run and adds each kind after another, like its neighbour', () => {
    for (const system of ['imperial', 'metric'] as const) {
      let line = newLine(system, newId)
      for (const kind of ELEMENT_KINDS) line = addElement(line, elementsOf(line).at(-1)!.id, kind, newId())
      expect(lineSchema.parse(line)).toEqual(line)
      expect(tags(line)).toEqual(['R1 R2 G1 P1 T1 X1'])
      expect(checkLine(line).filter(remark => remark.level === 'error')).toEqual([])
    }
    expect(elementsOf(addElement(schoolLine, of('R8').id, 'gate', newId())).find(element => element.tag === 'G6')).toMatchObject({ height: 10 * FOOT, faces: of('R8').faces })
    expect(() => addElement(schoolLine, 'nobody', 'run', newId())).toThrow(RangeError)
  })

  it('moves along the line and over the corners, and never empties a side', () => {
    expect(tags(moveElement(schoolLine, of('G1').id, 1))[0]).toBe('R1 R2 G1 G2 R3')
    expect(tags(moveElement(schoolLine, of('R3').id, 1)).slice(0, 2)).toEqual(['R1 G1 R2 G2', 'R3 R4 R5 G3 R6'])
    expect(tags(moveElement(schoolLine, of('R4').id, -1)).slice(0, 2)).toEqual(['R1 G1 R2 G2 R3 R4', 'R5 G3 R6'])
    expect(moveElement(schoolLine, of('R1').id, -1)).toBe(schoolLine)
    const single: Line = { ...schoolLine, sides: [{ key: 'A', name: '', elements: [run('R1', 5)] }, { key: 'B', name: '', elements: [run('R2', 5)] }] }
    expect(moveElement(single, single.sides[0]!.elements[0]!.id, 1)).toBe(single)
  })

  it('there and back again is the same line, wherever it moves', () => {
    fc.assert(fc.property(anyLine, fc.nat(), (line, n) => {
      const elements = elementsOf(line)
      const id = elements[n % elements.length]!.id
      const moved = moveElement(line, id, 1)
      if (moved !== line) expect(moveElement(moved, id, -1)).toEqual(line)
    }), { numRuns: 50 })
  })

  it('takes an element away, a side with its last one, but never the last of all', () => {
    expect(tags(removeElement(schoolLine, of('G2').id))[0]).toBe('R1 G1 R2 R3')
    const line = newLine('imperial', newId)
    const two = addSide(line, newId())
    expect(two.sides.map(side => side.key)).toEqual(['A', 'B'])
    expect(removeElement(two, elementsOf(two)[1]!.id).sides).toHaveLength(1)
    expect(removeElement(line, elementsOf(line)[0]!.id)).toBe(line)
  })

  it('keeps bays and leaves with the length as long as they are the usual ones', () => {
    expect(changeLength(run('R1', 84), 94 * FOOT, 'imperial').bays).toBe(10)
    expect(changeLength(run('R1', 84, 0, { bays: 12 }), 94 * FOOT, 'imperial').bays).toBe(12)
    expect(changeLength(gate('G1', [4, 4]), 10 * FOOT, 'imperial').gate!.leaves).toEqual([5 * FOOT, 5 * FOOT])
    expect(changeLength(gate('G1', [3, 5]), 10 * FOOT, 'imperial').gate!.leaves).toEqual([3 * FOOT, 5 * FOOT])
  })

  it('changes a kind without leaving anything of the old one', () => {
    for (const element of elementsOf(schoolLine)) {
      for (const kind of ELEMENT_KINDS) {
        const changed = changeKind(element, kind, 'imperial')
        expect(changed.id).toBe(element.id)
        expect(checkLine({ ...schoolLine, sides: [{ key: 'A', name: '', elements: [changed] }] }).filter(remark => remark.level === 'error')).toEqual([])
      }
    }
  })

  it('changes one element, a side\'s name, or the faces of all', () => {
    expect(elementsOf(changeElement(schoolLine, { ...of('G1'), name: 'office gate' })).filter(element => element.name)).toHaveLength(1)
    expect(renameSide(schoolLine, 'B', 'x'.repeat(90)).sides[1]!.name).toHaveLength(80)
    expect(new Set(elementsOf(facesForAll(schoolLine, of('R8').faces)).map(element => element.faces))).toEqual(new Set([of('R8').faces]))
  })
})
