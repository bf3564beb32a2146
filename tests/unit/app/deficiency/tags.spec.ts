import { describe, expect, it } from 'vitest'
import en from '~~/i18n/locales/en/deficiency.json'
import es from '~~/i18n/locales/es/deficiency.json'
import { answersOf, hourWords, TAG_DOINGS, TAG_PARTS, tagDoings, tagRows, tagSections, type TagDoing } from '~/composables/useTags'
import type { EntryKind, PayloadOf } from '#shared/entry/entry'
import { checkTargets, type Target } from '#shared/entry/entryRules'
import { may, type Role } from '#shared/permission/permission'
import { fold } from '#shared/round/fold'
import { bay, gap, GATE, look, PEOPLE, RoundStory, RUN, RUN2, trial } from '../../../helpers/roundStory'

const person = { account: null, name: 'Somebody' }
const SAID: Record<TagDoing, Omit<PayloadOf<EntryKind>, 'salt'>> = {
  correction: { photos: [], by: person }, cannot: { waitsFor: 'a latch' }, assignment: { to: person, due: null }, disputed: { words: 'It was dry' },
  deviationOffered: { words: 'May stay', until: null }, decided: { as: 'variance', by: person, on: '2026-11-30', document: 'Letter 14', words: 'May stay' },
  referred: { to: person, on: '2026-11-30', words: 'Not ours' }, enteredInError: { reason: 'Another run' },
}

function folded(story: RoundStory) {
  const outcome = fold(story.entries, story.bases, { basis: story.basis })
  return { outcome, rows: tagRows(outcome, story.bases.get(story.basis)!, story.entries) }
}
const found = (story: RoundStory, element: string, check: string, tag: string, more: { bay?: number } = {}) =>
  story.reading({ element, check, place: more.bay ? bay(more.bay) : null }, check === 'gap-below' ? gap(3) : check === 'self-closing' ? trial(1) : look('finding'), { tag })
const tagsOf = (story: RoundStory, me = { accountId: PEOPLE.crew, crew: true }) => {
  const { outcome, rows } = folded(story)
  return tagSections(rows, outcome.line, me).map(section => [section.part, section.groups.map(group => group.rows.map(row => row.of.tag).join('+'))])
}

describe('the order of tags', () => {
  it('walks the line once: due first, then along the line, with tags of one correction side by side', () => {
    const story = new RoundStory()
    // Found in an order that is not that of the line: R1, G1, R2.
    const far = found(story, RUN2, 'tie-ends', 'B4', { bay: 2 })
    found(story, RUN, 'gap-below', 'B3', { bay: 4 })
    found(story, RUN, 'gap-below', 'B2', { bay: 3 })
    found(story, RUN, 'tie-ends', 'B1', { bay: 1 })
    story.assign([far])
    expect(tagsOf(story)).toEqual([['toCorrect', ['B4', 'B1', 'B2+B3']]])
  })

  it('shows the crew theirs before what others have, and what waits or is settled below', () => {
    const story = new RoundStory()
    const [mine, theirs, waits, fixed, wrong] = ['B1', 'B2', 'B3', 'B4', 'B5'].map((tag, at) => found(story, [RUN, RUN2, GATE, RUN, RUN2][at]!, at === 3 ? 'gap-below' : 'tie-ends', tag, { bay: 1 + at % 2 }))
    story.assign([mine!])
    story.write('assignment', { to: { account: PEOPLE.bo, name: 'Bo' }, due: null }, { author: PEOPLE.manager, ...story.about([theirs!]) })
    story.write('cannot', { waitsFor: 'a latch' }, { author: PEOPLE.crew, ...story.about([waits!]) })
    story.correct([fixed!])
    story.inError(wrong!)
    expect(tagsOf(story)).toEqual([['toCorrect', ['B1']], ['others', ['B2']], ['waiting', ['B3']], ['corrected', ['B4']], ['settled', ['B5']]])
    expect(tagsOf(story, { accountId: PEOPLE.ana, crew: false }).map(([part]) => part)).toEqual(['toRead', 'toCorrect', 'waiting', 'settled'])
  })
})

describe('the next word on a tag', () => {
  /** A finding with a word of every kind that stays on the table. */
  function argued() {
    const story = new RoundStory()
    const reading = found(story, RUN, 'post-spacing', 'B1', { bay: 1 })
    story.assign([reading])
    story.write('cannot', { waitsFor: 'a post' }, { author: PEOPLE.crew, ...story.about([reading]) })
    story.correct([reading])
    story.write('disputed', { words: 'No' }, { author: PEOPLE.crew, ...story.about([reading]) })
    return story
  }

  it.each(TAG_DOINGS)('%s names only what the rules of entries let it name, and comes to something', (doing) => {
    const story = argued()
    const [row] = folded(story).rows
    const known = new Map(story.entries.map(entry => [entry.envelope.id, entry.envelope as Target]))
    for (const answers of answersOf(doing, row!, story.entries)) {
      const id = story.write(doing, SAID[doing], { element: row!.of.element, check: row!.of.check, place: row!.of.place, author: PEOPLE.bo, answers })
      expect(checkTargets(story.get(id), one => known.get(one))).toEqual({ state: 'ok' })
    }
    const { outcome } = folded(story)
    expect(outcome.ignored).toEqual([])
    expect(outcome.refusedLinks).toEqual([])
    // What cannot answer a dispute is not offered while there is one.
    const whyNot = tagDoings(row!, { accountId: PEOPLE.bo, may: () => true }).find(one => one.doing === doing)!.whyNot
    if (doing !== 'disputed' && whyNot !== 'disputed') expect(outcome.deficiencies[0]!.state).not.toBe('disputed')
  })

  it('takes a dispute and a "cannot" off the table by a correction', () => {
    const story = argued()
    const [row] = folded(story).rows
    story.write('correction', { photos: [], by: person }, { element: row!.of.element, check: row!.of.check, author: PEOPLE.crew, answers: answersOf('correction', row!, story.entries)[0]! })
    expect(folded(story).outcome.deficiencies[0]!.state).toBe('corrected')
  })

  it('gives each reading that stands its own word where a word is of one reading', () => {
    const story = new RoundStory()
    const one = found(story, RUN, 'post-spacing', 'B1', { bay: 1 })
    // Read again by another person and still wrong: the finding goes on with both.
    story.reading({ element: RUN, check: 'post-spacing', place: bay(1), answers: [one], author: PEOPLE.bo }, look('finding'))
    const [row] = folded(story).rows
    const lists = answersOf('referred', row!, story.entries)
    expect(lists.map(list => list.length)).toEqual(row!.of.standing.map(() => 1))
    for (const answers of lists) story.write('referred', SAID.referred as Omit<PayloadOf<'referred'>, 'salt'>, { element: RUN, check: 'post-spacing', author: PEOPLE.manager, answers })
    expect(folded(story).outcome.deficiencies[0]!.state).toBe('endedReferred')
  })
})

describe('what is offered', () => {
  const offered = (check: string, role: Role, accountId: string) => {
    const story = new RoundStory()
    found(story, check === 'self-closing' ? GATE : RUN, check, 'B1')
    return Object.fromEntries(tagDoings(folded(story).rows[0]!, { accountId, may: permission => may(role, permission) }).map(one => [one.doing, one.whyNot]))
  }
  it('lets the crew correct, wait and dispute, and says who does the rest', () => {
    expect(offered('post-spacing', 'crew', PEOPLE.crew)).toEqual({ correction: null, cannot: null, assignment: 'staffOnly', disputed: null, deviationOffered: 'managerOnly', decided: 'managerOnly', referred: 'managerOnly', enteredInError: 'staffOnly' })
  })
  it('never lets the first reader say that it was an error', () => {
    expect(offered('post-spacing', 'inspector', PEOPLE.ana).enteredInError).toBe('ownReading')
    expect(offered('post-spacing', 'inspector', PEOPLE.bo).enteredInError).toBeNull()
  })
  it('offers a deviation only where the class allows it', () => {
    expect(offered('post-spacing', 'manager', PEOPLE.manager).deviationOffered).toBeNull()
    expect(offered('gap-below', 'manager', PEOPLE.manager).deviationOffered).toBe('mustBeCorrected')
    expect(offered('self-closing', 'manager', PEOPLE.manager).deviationOffered).toBe('mustBeCorrected')
  })
})

describe('hours', () => {
  it.each([['15:00', '3 pm', '15:00'], ['00:30', '12:30 am', '0:30'], ['12:00', '12 pm', '12:00'], ['09:05', '9:05 am', '9:05'], ['15:12 EST', '3:12 pm', '15:12']])('%s is said %s', (clock, english, spanish) => {
    expect(hourWords(clock, 'en')).toBe(english)
    expect(hourWords(clock, 'es')).toBe(spanish)
  })
})

type Words = { [key: string]: string | Words }
const flat = (words: Words, under = ''): [string, string][] => Object.entries(words).flatMap(([key, value]) => typeof value === 'string' ? [[under + key, value] as [string, string]] : flat(value, `${under}${key}.`))
const names = (text: string) => [...new Set([...text.matchAll(/\{(\w+)\}/g)].map(one => one[1]))].sort()
describe('the words of tags', () => {
  const [english, spanish] = [new Map(flat(en)), new Map(flat(es))]
  it('stand whole in both languages, with the same names and forms', () => {
    expect([...spanish.keys()].sort()).toEqual([...english.keys()].sort())
    for (const [key, text] of english) {
      expect(names(spanish.get(key)!), key).toEqual(names(text))
      expect(spanish.get(key)!.split(' | ').length, key).toBe(text.split(' | ').length)
    }
  })
  it('has words for every part and doing', () => {
    const wanted = [...TAG_PARTS.map(part => `deficiency.part.${part}`), ...TAG_DOINGS.flatMap(doing => [`deficiency.doing.${doing}`, ...(doing === 'correction' ? [] : ['title', 'means', 'words', 'save'].map(key => `deficiency.word.${doing}.${key}`))])]
    expect(wanted.filter(key => !english.has(key))).toEqual([])
  })
})
