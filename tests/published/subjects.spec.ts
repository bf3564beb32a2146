import { describe, expect, it } from 'vitest'
import { readBuiltIn } from '#server/services/checklist/readBuiltIn'
import type { Check } from '#shared/checklist/check'
import { SUBJECTS } from '../fixtures/subjects/subjects'

const lists = readBuiltIn()
const checks = new Map<string, Check>(lists.flatMap(list => list.checks).map(check => [check.id, check]))

describe('the built-in checklists', () => {
  it('are asked for the heart (A to N) and the numbers 1 to 51', () => {
    expect(SUBJECTS.map(one => one.subject)).toEqual([...'ABCDEFGHIJKLMN', ...Array.from({ length: 51 }, (_, at) => String(at + 1))])
  })
  it.each(SUBJECTS.map(one => [one.subject, one] as const))('hold subject %s', (_, { checks: ids }) => {
    expect(ids.filter(id => !checks.has(id))).toEqual([])
  })
  it.each(SUBJECTS.filter(one => one.facts.length > 0).map(one => [one.subject, one] as const))('name the published statements of subject %s', (_, { checks: ids, facts }) => {
    const named = new Set(ids.flatMap(id => checks.get(id)?.sources ?? []))
    expect(facts.filter(fact => !named.has(fact))).toEqual([])
  })
  it('leave no check without a subject, but those that a published statement alone calls for', () => {
    const asked = new Set(SUBJECTS.flatMap(one => one.checks))
    // B09 loose cables; C13 and C15 are further clauses of the federal accessibility standard
    expect([...checks.keys()].filter(id => !asked.has(id)).sort()).toEqual(['gates-in-series', 'latch-side-projection', 'loose-cables'])
  })
  it('give each list what its setting is there for', () => {
    const ids = (list: string) => new Set(lists.find(one => one.id === list)!.checks.map(check => check.id))
    for (const list of lists) expect(ids(list.id).has('tie-ends-in'), list.id).toBe(true)
    expect(ids('pool-adjacent').has('latch-height-leaf')).toBe(true)
    expect(ids('playground').has('use-zone-clear')).toBe(true)
    expect(ids('school-grounds').has('pool-sphere')).toBe(false)
  })
})

describe('each built-in check', () => {
  const all = [...checks.values()]
  const words = (check: Check) => [check.title, check.task, check.note, ...[check.caution, check.noLimit, check.gauge].filter(text => text !== undefined), ...check.tries?.map(one => one.label) ?? []]

  it('is whole in English and in Spanish, never the same text twice', () => {
    expect(all.flatMap(check => words(check).filter(text => text.en.trim() === '' || text.es.trim() === '' || text.en === text.es).map(text => `${check.id}: ${text.en}`))).toEqual([])
  })
  it('uses no word that we do not use', () => {
    const banned = /\b(pass(ed|es)?\/fail|audit|issues?|actions?|flagged|certif\w*|complian\w*|safe|safely|guarant\w*|approv\w*|concession|dispatch|seguro|segura|garant\w*|aprobad\w*)\b/i
    expect(all.flatMap(check => words(check).flatMap(text => [text.en, text.es]).filter(text => banned.test(text)))).toEqual([])
  })
  it('has a title and a task of its own', () => {
    for (const pick of [(check: Check) => check.title.en, (check: Check) => check.title.es, (check: Check) => check.task.en, (check: Check) => check.task.es]) {
      const texts = all.map(pick)
      expect(texts.filter((text, at) => texts.indexOf(text) !== at)).toEqual([])
    }
  })
  it('does edges, ends, protrusions and entrapment in full', () => {
    expect(all.filter(check => check.sampled).map(check => check.finding).filter(kind => !['loosePart', 'other'].includes(kind))).toEqual([])
  })
  it('is read once for the line only beside a check of its kind that every element is asked for, where edges, ends, protrusions or entrapment are at stake', () => {
    const once = all.filter(check => (check.asked === 'line' || check.unset === 'line') && (check.concern === 'entrapment' || ['tieEnd', 'sharpEdge', 'boltProud', 'opening', 'gapBelow'].includes(check.finding)))
    expect(once.length).toBeGreaterThan(6)
    const each = all.filter(check => check.asked !== 'line' && check.unset === undefined && check.settings.length === 0)
    expect(once.flatMap(check => check.elements.filter(kind => !each.some(one => one.finding === check.finding && one.elements.includes(kind))).map(kind => `${check.id} on a ${kind}`))).toEqual([])
  })
  it('is never below correct first where law, drowning, entrapment, exits or accessibility is at stake', () => {
    expect(all.filter(check => ['law', 'drowning', 'entrapment', 'exit', 'accessibility'].includes(check.concern) && check.class === 'ownerMayAccept').map(check => check.id)).toEqual([])
  })
  it('keeps an automatic gate from being tried under power', () => {
    // "automatic gates (trained people only, not tested under power)": no trial may reach one
    const trials = all.filter(check => check.method === 'trial' && check.elements.includes('gate') && /gate|latch|slide|rod|hold|hinge|fist/.test(check.id))
    expect(trials.length).toBeGreaterThan(8)
    expect(trials.filter(check => !/!gate\.automatic/.test(check.when ?? '') && check.section !== 'exits').map(check => check.id)).toEqual([])
  })
})
