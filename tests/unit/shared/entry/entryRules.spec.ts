import { describe, expect, it } from 'vitest'
import { ANSWERED_BY } from '#shared/round/findDeficiencies'
import type { AnyEntry, EntryKind } from '#shared/entry/entry'
import { ENTRY_KINDS } from '#shared/entry/entry'
import type { Target } from '#shared/entry/entryRules'
import { checkTargets, ENTRY_RULES } from '#shared/entry/entryRules'
import { may } from '#shared/permission/permission'
import { bay, gap, GATE, look, PEOPLE, RoundStory, RUN, uuid } from '../../../helpers/roundStory'

const GAP = { element: RUN, check: 'gap-below' }
/** What the last written entry comes to, against those before it. */
function last(it: RoundStory, only: (entry: AnyEntry) => boolean = () => true) {
  const known = new Map(it.entries.slice(0, -1).filter(only).map(entry => [entry.envelope.id, entry.envelope as Target]))
  const state = checkTargets(it.entries[it.entries.length - 1]!, id => known.get(id))
  return state.state === 'refused' ? `${state.refusal.code} ${state.refusal.pointer}` : state.state === 'waiting' ? state.for : state.state
}

describe('the rules of naming', () => {
  it('have a row for each kind, and name only kinds that there are', () => {
    expect(Object.keys(ENTRY_RULES).sort()).toEqual([...ENTRY_KINDS].sort())
    for (const rule of Object.values(ENTRY_RULES)) for (const kind of [...rule.replaces, ...rule.answers]) expect(ENTRY_KINDS).toContain(kind)
  })

  it('let a kind be the newer word only of its own kind, and a reading also of what set its check aside', () => {
    for (const [kind, rule] of Object.entries(ENTRY_RULES)) expect(rule.replaces.filter(one => one !== kind && !(kind === 'reading' && one === 'setAside'))).toEqual([])
  })

  it('let nothing replace an error told by a second person, nor the opening of a walk', () => {
    for (const rule of Object.values(ENTRY_RULES)) {
      expect(rule.replaces).not.toContain('enteredInError')
      expect(rule.replaces).not.toContain('walkOpened')
    }
  })

  it('give acceptance to the client alone, and words that end a deficiency to nobody on the crew', () => {
    const writers = (kind: EntryKind) => (['inspector', 'crew', 'manager', 'administrator', 'client'] as const).filter(actor => may(actor, ENTRY_RULES[kind].permission))
    expect(writers('deviationAccepted')).toEqual(['client'])
    for (const kind of ['decided', 'referred', 'enteredInError', 'settled', 'basisChanged'] as const) {
      expect(writers(kind)).not.toContain('crew')
      expect(writers(kind)).not.toContain('client')
    }
    for (const kind of ['reading', 'correction', 'dangerNow', 'note'] as const) expect(writers(kind)).toEqual(['inspector', 'crew', 'manager', 'administrator'])
  })
})

describe('checking targets', () => {
  it('holds what names an entry that has not come, or one of a kind that these rules do not know', () => {
    const it = new RoundStory()
    const bad = it.reading(GAP, gap(3))
    it.correct([bad])
    expect(last(it)).toBe('ok')
    expect(last(it, () => false)).toEqual([bad])
    const newer = { ...it.get(bad).envelope, version: 2 }
    expect(checkTargets(it.entries[1]!, () => newer)).toEqual({ state: 'waiting', for: [bad] })
  })

  it('refuses another check, element, job or kind, with a pointer', () => {
    const it = new RoundStory()
    const bad = it.reading(GAP, gap(3))
    it.write('correction', { photos: [], by: { account: null, name: 'Helper' } }, { element: RUN, check: 'tie-ends', answers: [bad] })
    expect(last(it)).toBe('target /envelope/answers/0')
    it.reading({ element: GATE, check: 'gap-below', replaces: [bad] }, gap(1))
    expect(last(it)).toBe('target /envelope/replaces/0')
    const other: Target = { ...it.get(bad).envelope, job: uuid(2, 2) }
    it.correct([bad])
    expect(checkTargets(it.entries[3]!, () => other)).toMatchObject({ state: 'refused', refusal: { code: 'target' } })
    it.write('note', { words: 'See the gap', photos: [] }, { element: GATE, answers: [bad] })
    expect(last(it)).toBe('ok')
    it.write('note', { words: 'See the gap', photos: [] }, { element: RUN, check: 'gap-below', replaces: [bad] })
    expect(last(it)).toBe('target /envelope/replaces/0')
  })

  it('lets a reading name a correction elsewhere: whether it is disturbed is for the fold to say', () => {
    const it = new RoundStory()
    const fixed = it.correct([it.reading({ ...GAP, place: bay(1) }, gap(3))])
    it.reading({ element: GATE, check: 'tie-ends', answers: [fixed] }, look('clear'))
    expect(last(it)).toBe('ok')
  })

  it('wants one reading for a word that ends, and some for a word about a deficiency', () => {
    const it = new RoundStory()
    const one = it.reading({ ...GAP, place: bay(1) }, gap(3))
    const two = it.reading({ ...GAP, place: bay(2) }, gap(3))
    it.accept([one, two])
    expect(last(it)).toBe('target /envelope/answers')
    it.correct([one, two])
    expect(last(it)).toBe('ok')
    it.write('correction', { photos: [], by: { account: null, name: 'Helper' } }, GAP)
    expect(last(it)).toBe('target /envelope/answers')
  })

  it('refuses that people call their own reading an error', () => {
    const it = new RoundStory()
    const bad = it.reading(GAP, gap(3))
    it.inError(bad, PEOPLE.ana)
    expect(last(it)).toBe('ownReading /envelope/answers/0')
    it.inError(bad, PEOPLE.bo)
    expect(last(it)).toBe('ok')
  })

  it('takes back the setting aside of a check, not of a whole element', () => {
    const it = new RoundStory()
    const check = it.write('setAside', { as: 'notInspected', why: 'noAccess', photos: [] }, GAP)
    it.reading({ ...GAP, replaces: [check] }, gap(1))
    expect(last(it)).toBe('ok')
    const whole = it.write('setAside', { as: 'notInspected', why: 'noAccess', photos: [] }, { element: RUN })
    it.reading({ ...GAP, answers: [whole] }, gap(1))
    expect(last(it)).toBe('ok')
    it.reading({ ...GAP, replaces: [whole] }, gap(1))
    expect(last(it)).toBe('target /envelope/replaces/0')
  })

  it('let no word take another off the table that it may not name', () => {
    // contracts.md 2: an entry answers only kinds that its own kind allows; a dispute does not end by a word that cannot look at it
    const pairs = Object.entries(ANSWERED_BY).flatMap(([kind, by]) => by.map(other => [other, kind] as const))
    expect(pairs.length).toBeGreaterThan(15)
    expect(pairs.filter(([other, kind]) => !(ENTRY_RULES[other].answers as readonly string[]).includes(kind) && !(ENTRY_RULES[other].replaces as readonly string[]).includes(kind))).toEqual([])
  })
})
