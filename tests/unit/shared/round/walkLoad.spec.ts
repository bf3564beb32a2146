import { describe, expect, it } from 'vitest'
import { readBuiltIn } from '#server/services/checklist/readBuiltIn'
import { elementsOf } from '#shared/line/line'
import { readQuickLine } from '#shared/line/readQuickLine'
import { makeBasis } from '#shared/round/makeBasis'

/** A school line as one meets it: eight runs, four gates (one accessible, one an exit, one for vehicles). */
const LINE = `all: 6 ft high, 2 in mesh, school, soft ground
A (Street side): R1 80 ft run; G1 4 ft gate, self-closing, accessible route; R2 96 ft run; G2 12 ft double gate; R3 60 ft run
B (Yard side): R4 110 ft run; G3 4 ft gate, exit; R5 90 ft run, up 6 in; R6 70 ft run
C (Field side): R7 120 ft run; G4 4 ft gate; R8 64 ft run`

let count = 0
const read = readQuickLine(LINE, { system: 'imperial', newId: () => `00000000-0000-4000-8000-${String(++count).padStart(12, '0')}` })
if ('errors' in read) throw new Error(JSON.stringify(read.errors))
const elements = elementsOf(read.line)
const basis = makeBasis(read.line, readBuiltIn().filter(list => list.id === 'school-grounds'), [])
const grouped = new Set(basis.checks.filter(check => check.group).map(check => check.id))
const single = basis.tasks.filter(task => !grouped.has(task.check))

describe('what a school line of twelve elements asks of an inspector (own judgement of what one person can do in a morning)', () => {
  it('is a run measured in a handful of places, a plain gate in a dozen, and a short list for the line', () => {
    const own = (tag: string) => single.filter(task => !task.line && task.element === elements.find(one => one.tag === tag)!.id).map(task => task.check)
    expect(own('R1')).toEqual(['gap-below', 'head-opening'])
    expect(own('G4').length).toBeLessThanOrEqual(12)
    expect(new Set(single.filter(task => task.line).map(task => task.check)).size).toBeLessThanOrEqual(20)
  })
  it('is a hundred answers at most besides the looks of each pass, where version 1 of the lists asked 389', () => {
    const once = new Set(single.filter(task => task.line).map(task => task.check))
    expect(single.filter(task => !task.line).length + once.size).toBeLessThanOrEqual(100)
  })
  it('leaves no element without its tie ends, cut ends and openings looked at on each face', () => {
    for (const element of elements) {
      const faces = (check: string) => basis.tasks.filter(task => task.element === element.id && task.check === check && !task.line).map(task => task.face)
      for (const check of ['tie-ends-in', 'cut-ends-turned', 'bolt-heads-out', 'fabric-whole']) expect(faces(check)).toEqual(['outer', 'inner'])
    }
  })
})
