import { describe, expect, it } from 'vitest'
import { parseChecklists } from '#shared/checklist/parseChecklists'
import { ChecklistError, checklistProblems } from '#shared/checklist/checklistProblems'
import { readBuiltIn, readPublishedFacts } from '#server/services/checklist/readBuiltIn'

const facts = readPublishedFacts()
const list = 'id: own-list\nversion: 1\ntitle: { en: List, es: Lista }\nsections: [one]\n'

/** A section of one measure, with lines put in the place of others. */
const section = (swap: [string, string][] = [], more = '') => swap.reduce((text, [from, to]) => {
  if (!text.includes(from)) throw new Error(`"${from}" is not in the section`)
  return text.replace(from, to)
}, `id: one
title: { en: One, es: Uno }
defaults:
  placeTolerance: { inches: 12 }
  photo: none
  note: { en: Local code first., es: Primero el código local. }
checks:
  - id: gap-here
    title: { en: Gap, es: Hueco }
    task: { en: Tape it., es: Mídalo. }
    method: measure
    answeredFor: worst
    elements: [run]
    measurand: gap
    datum: ground
    unit: length
    limits:
      - { fact: A07, high: { inches: 2 }, when: '"pool" in element.settings' }
    noLimit: { en: Nobody says., es: Nadie lo dice. }
    class: correctFirst
    concern: entrapment
    finding: gapBelow
    group: false
    drawing: gapBelow
    disturbs: []
`) + more

const problemsOf = (text: string, of = list): string[] => {
  try {
    parseChecklists({ checklists: [of], sections: [text] }, facts)
    return []
  }
  catch (error) {
    if (error instanceof ChecklistError) return error.problems.map(problem => `${problem.code} ${problem.pointer}`)
    throw error
  }
}

describe('parseChecklists', () => {
  it('fills in what a section shares, the integers and the source', () => {
    const [one] = parseChecklists({ checklists: [list], sections: [section()] }, facts)
    expect(one!.checks[0]).toMatchObject({ section: 'one', placeTolerance: 97_536_000, settings: [], note: { es: 'Primero el código local.' } })
    expect(one!.checks[0]!.limits).toEqual([{
      id: 'A07.gap.ground', measurand: 'gap', datum: 'ground', unit: 'length', when: '"pool" in element.settings',
      low: null, high: { imperial: 16_256_000, inclusive: true }, avoid: null,
      basis: { kind: 'builtIn', name: 'CPSC Safety Barrier Guidelines (Pub. 362)', citation: 'under', edition: 'as summarised (2012-era text)', read: 'read in a summary', fact: 'A07' },
    }])
  })
  it.each<[string, [string, string][], string]>([
    ['a figure that is not the source\'s', [['inches: 2 }', 'inches: 2.5 }']], 'figure-differs /checks/0/limits/0'],
    ['millimetres that the source does not print', [['inches: 2 }', 'inches: 2, millimetres: 51 }']], 'figure-differs /checks/0/limits/0'],
    ['the wrong end', [['high: { inches', 'low: { inches']], 'figure-differs /checks/0/limits/0'],
    ['"under" where the source says "at most"', [['inches: 2 }', 'inches: 2, inclusive: false }']], 'figure-differs /checks/0/limits/0'],
    ['a statement from memory', [['fact: A07', 'fact: A31']], 'from-memory /checks/0/limits/0'],
    ['a statement that is not there', [['fact: A07', 'fact: A99']], 'unknown-fact /sections/one/gap-here/limits'],
    ['a statement without a figure', [['fact: A07', 'fact: A14']], 'no-bound /checks/0/limits/0'],
    ['a misspelt fact', [['element.settings', 'element.setings']], 'condition-unknown-fact /checks/0/limits/0/when'],
    ['a misspelt setting', [['"pool"', '"pol"']], 'condition-unknown-value /checks/0/limits/0/when'],
    ['a missing language', [['{ en: Gap, es: Hueco }', '{ en: Gap }']], 'schema /checks/0/title/es'],
    ['a class under the floor', [['class: correctFirst', 'class: ownerMayAccept']], 'schema /checks/0/class'],
    ['entrapment sampled', [['group: false', 'group: false\n    sampled: true']], 'schema /checks/0/sampled'],
    ['a measure confirmed as a group', [['group: false', 'group: true']], 'schema /checks/0/group'],
    ['a measure without a datum', [['    datum: ground\n', '']], 'schema /checks/0/limits/0/datum'],
    ['a conditional limit without a reason elsewhere', [['    noLimit: { en: Nobody says., es: Nadie lo dice. }\n', '']], 'schema /checks/0/noLimit'],
    ['a look with a limit', [['method: measure', 'method: look']], 'schema /checks/0/limits'],
    ['a trial without tries', [['method: measure', 'method: trial']], 'schema /checks/0/tries'],
    ['a template without a gauge', [['method: measure', 'method: template']], 'schema /checks/0/conformsWhen'],
    ['a key that is not known', [['method: measure', 'metod: measure\n    method: measure']], 'schema /checks/0'],
    ['a check disturbed that no section knows', [['disturbs: []', 'disturbs: [nowhere-at-all]']], 'unknown-check /checks/0/disturbs'],
    ['a source that is not there', [['disturbs: []', 'disturbs: []\n    sources: [A99]']], 'unknown-fact /checks/0/sources'],
    ['a key twice', [['method: measure', 'method: measure\n    method: look']], 'yaml /sections'],
  ])('refuses %s', (_, swap, problem) => {
    expect(problemsOf(section(swap))).toContain(problem)
  })
  it('refuses an id twice and a section that is not there', () => {
    const [, check] = section().split('checks:\n')
    expect(problemsOf(section([], check))).toContain('check-twice /checks/1/id')
    expect(problemsOf(section(), list.replace('[one]', '[one, two]'))).toEqual(['unknown-section /checklist/sections'])
  })
  it('drops what is disturbed in a section that the list leaves out', () => {
    const other = section([['id: one', 'id: two'], ['gap-here', 'gap-there']])
    const [one] = parseChecklists({ checklists: [list], sections: [section([['disturbs: []', 'disturbs: [gap-there]']]), other] }, facts)
    expect(one!.checks[0]!.disturbs).toEqual([])
  })
})

describe('checklistProblems', () => {
  it('finds nothing in the built-in lists, and the change when one is changed', () => {
    for (const one of readBuiltIn()) expect(checklistProblems(one, facts)).toEqual([])
    const one = structuredClone(readBuiltIn()[0]!)
    const at = one.checks.findIndex(check => check.limits.length > 0)
    one.checks[at]!.limits[0]!.basis.name = 'Somebody else'
    expect(checklistProblems(one, facts).map(problem => problem.code)).toEqual(['basis-differs'])
  })
  it('lets an organisation set a figure of its own', () => {
    const one = structuredClone(readBuiltIn()[0]!)
    const check = one.checks.find(each => each.id === 'band-spacing')!
    check.limits.push({ id: 'own-bands', measurand: 'band-spacing', datum: 'centre-to-centre', unit: 'length', low: null, high: { imperial: 121_920_000, inclusive: true }, avoid: null, basis: { kind: 'organisation', name: 'Our shop standard' } })
    expect(checklistProblems(one, facts)).toEqual([])
  })
})
