import { describe, expect, it } from 'vitest'
import { elementsOf } from '#shared/line/line'
import { fold } from '#shared/round/fold'
import { continuedFinding, correctionAnswers, groupLinks, readingLinks, relationAt, usualPlace } from '#shared/round/readingLinks'
import { dangerChecks, entryOf, facesAsked, findingChecks, lineChecks, nextElement, nextLeft, oneByOne, passCovers, passOrder, stepBack, stepOn, walkChecks } from '#shared/round/walkPlan'
import { basisOf, bay, CHECKS, element, gap, GATE, look, RoundStory, RUN, RUN2 } from '../../../helpers/roundStory'

const whole = { face: null, bay: null, from: null, height: null }
const nobody = () => null
const outcomeOf = (round: RoundStory) => fold(round.entries, round.bases, { basis: round.basis })
const of = (round: RoundStory, id: string) => elementsOf(outcomeOf(round).line).find(one => one.id === id)!
const checksOf = (round: RoundStory, id = RUN) => walkChecks([...round.bases.values()][0]!, outcomeOf(round), of(round, id))
const checkOf = (round: RoundStory, check: string, id = RUN) => checksOf(round, id).find(one => one.check.id === check)!
const names = (list: readonly { check: { id: string } }[]) => list.map(one => one.check.id)

describe('what a pass covers', () => {
  it('offers looks that may be confirmed as a group, and no measure, trial or look by itself', () => {
    const round = new RoundStory()
    expect(names(passCovers(checksOf(round), 'outer'))).toEqual(['tie-ends'])
    // A look before the tape is taken up
    expect(names(oneByOne(checksOf(round)))).toEqual(['post-spacing', 'gap-below'])
  })

  it('leaves the other face to its own pass', () => {
    const basis = basisOf()
    basis.tasks = [{ element: RUN, check: 'tie-ends', face: 'outer', limits: [] }, { element: RUN, check: 'tie-ends', face: 'inner', limits: [] }]
    const round = new RoundStory(basis)
    expect(passCovers(checksOf(round), 'inner').map(one => one.outcome.face)).toEqual(['inner'])
    expect(facesAsked(outcomeOf(round))).toEqual(['outer', 'inner'])
  })

  it('does not ask again once it was confirmed', () => {
    const round = new RoundStory()
    round.reading({ element: RUN, check: 'tie-ends', place: whole }, look('clear'), { group: '019a0000-0000-7000-8000-000000000001' })
    expect(passCovers(checksOf(round), 'outer')).toEqual([])
  })

  it('offers a look with an open finding, since all but that place may be in order, until the rest was confirmed', () => {
    const round = new RoundStory()
    round.reading({ element: RUN, check: 'tie-ends', place: bay(2) }, look('finding'), { tag: 'B1' })
    const [covered] = passCovers(checksOf(round), 'outer')
    expect(covered!.open.map(one => one.tag)).toEqual(['B1'])
    round.reading({ element: RUN, check: 'tie-ends', place: whole, ...groupLinks(covered!, nobody) }, look('clear'))
    expect(passCovers(checksOf(round), 'outer')).toEqual([])
  })

  it('never ends a finding, not even one whose correction waits to be looked at', () => {
    const round = new RoundStory()
    const found = round.reading({ element: RUN, check: 'tie-ends', place: bay(2) }, look('finding'), { tag: 'B1' })
    round.correct([found])
    expect(passCovers(checksOf(round), 'outer')).toEqual([])
    // Whoever had the list open before the correction came names what they saw then.
    round.reading({ element: RUN, check: 'tie-ends', place: whole, ...groupLinks(checkOf(round, 'tie-ends'), nobody) }, look('clear'))
    expect(outcomeOf(round).deficiencies[0]).toMatchObject({ tag: 'B1', state: 'corrected' })
  })

  it('offers again what a correction beside it disturbed, and that confirms it', () => {
    const round = new RoundStory()
    round.reading({ element: RUN, check: 'tie-ends', place: whole }, look('clear'))
    round.correct([round.reading({ element: GATE, check: 'gap-below', place: bay(1) }, gap(3), { tag: 'B1' })])
    const [covered] = passCovers(checksOf(round), 'outer')
    expect(covered!.outcome.readAgain).toBe(true)
    round.reading({ element: RUN, check: 'tie-ends', place: whole, ...groupLinks(covered!, nobody) }, look('clear'))
    expect(checkOf(round, 'tie-ends').outcome).toMatchObject({ readAgain: false, verdict: 'conforms' })
  })
})

describe('finding keys', () => {
  it('offer the checks of their kind here, and stand in with a look where none is asked', () => {
    const round = new RoundStory()
    const basis = [...round.bases.values()][0]!
    expect(findingChecks(basis, checksOf(round), 'outer', 'gapBelow').map(one => [one.check.id, one.asked])).toEqual([['gap-below', true]])
    expect(findingChecks(basis, [], 'outer', 'tieEnd').map(one => [one.check.id, one.asked])).toEqual([['tie-ends', false]])
    expect(findingChecks(basis, [], 'outer', 'gapBelow')).toEqual([])
  })

  it('let something else be of any check here, its own kind first', () => {
    const round = new RoundStory()
    expect(names(findingChecks([...round.bases.values()][0]!, checksOf(round), 'outer', 'other'))).toEqual(['post-spacing', 'tie-ends', 'gap-below'])
  })

  it('put what takes a gate out of use first when there is danger', () => {
    expect(names(dangerChecks(checksOf(new RoundStory(), GATE), 'outer'))).toEqual(['self-closing', 'tie-ends'])
  })
})

describe('what a reading names', () => {
  it('is a new finding beside the one in the same bay, with a tag of its own', () => {
    const round = new RoundStory()
    round.reading({ element: RUN, check: 'tie-ends', place: bay(2) }, look('finding'), { tag: 'B1' })
    const one = checkOf(round, 'tie-ends')
    const links = readingLinks(one, bay(2), of(round, RUN), { another: true, asideOf: nobody })
    expect(continuedFinding(one, links)).toBeNull()
    round.reading({ element: RUN, check: 'tie-ends', place: bay(2), ...links }, look('finding'), { tag: 'B2' })
    expect(outcomeOf(round).deficiencies.map(each => each.tag).sort()).toEqual(['B1', 'B2'])
  })

  it('ends a deficiency by looking at it and its correction', () => {
    const round = new RoundStory()
    round.reading({ element: RUN, check: 'gap-below', place: bay(3) }, gap(3), { tag: 'B1' })
    round.correct(correctionAnswers(outcomeOf(round).deficiencies))
    const one = checkOf(round, 'gap-below')
    const [again] = outcomeOf(round).deficiencies
    expect(relationAt(one, bay(3), of(round, RUN), again!)).toBe('again')
    round.reading({ element: RUN, check: 'gap-below', place: bay(3), ...readingLinks(one, bay(3), of(round, RUN), { again, asideOf: nobody }) }, gap(1))
    expect(outcomeOf(round).deficiencies[0]!.state).toBe('endedCorrected')
    expect(outcomeOf(round).refusedLinks).toEqual([])
  })

  it('goes on with the same finding when it still does not conform', () => {
    const round = new RoundStory()
    round.reading({ element: RUN, check: 'gap-below', place: bay(3) }, gap(3), { tag: 'B1' })
    round.correct(correctionAnswers(outcomeOf(round).deficiencies))
    const one = checkOf(round, 'gap-below')
    const links = readingLinks(one, bay(3), of(round, RUN), { again: outcomeOf(round).deficiencies[0], asideOf: nobody })
    expect(continuedFinding(one, links)?.tag).toBe('B1')
    round.reading({ element: RUN, check: 'gap-below', place: bay(3), ...links }, gap(2.5), { tag: 'B1' })
    expect(outcomeOf(round).deficiencies).toHaveLength(1)
    expect(outcomeOf(round).deficiencies[0]!.state).toBe('open')
  })

  it('asks how it stands to a reading at the same place, and can take its place with a reason', () => {
    const round = new RoundStory()
    round.reading({ element: RUN, check: 'gap-below', place: bay(3) }, gap(1))
    const one = checkOf(round, 'gap-below')
    expect(relationAt(one, bay(4), of(round, RUN), null)).toBe('first')
    expect(relationAt(one, bay(3), of(round, RUN), null)).toBe('ask')
    round.reading({ element: RUN, check: 'gap-below', place: bay(3), ...readingLinks(one, bay(3), of(round, RUN), { replacing: true, asideOf: nobody }) }, gap(1.5), { reason: 'Misread' })
    expect(checkOf(round, 'gap-below').outcome.heads.map(head => head.value)).toEqual([gap(1.5)])
  })

  it('replaces a word that the check was not inspected, and only looks at one on the whole element', () => {
    const round = new RoundStory()
    const aside = round.write('setAside', { as: 'notInspected', why: 'notYet', photos: [] }, { element: RUN, check: 'gap-below' })
    const one = checkOf(round, 'gap-below')
    expect(oneByOne(checksOf(round)).map(each => each.check.id)).toContain('gap-below')
    expect(readingLinks(one, bay(1), of(round, RUN), { asideOf: () => 'check' })).toEqual({ answers: [], replaces: [aside] })
    expect(readingLinks(one, bay(1), of(round, RUN), { asideOf: () => 'element' })).toEqual({ answers: [aside], replaces: [] })
  })
})

describe('the way along the line', () => {
  const { line } = basisOf()
  it('goes bay by bay to the end of an element, then to the next one', () => {
    expect(stepOn(line, { element: RUN, bay: 3 }, false)).toEqual({ to: { element: RUN, bay: 4 } })
    expect(stepOn(line, { element: RUN, bay: 4 }, false)).toEqual({ end: true })
    expect(stepOn(line, { element: RUN, bay: 1 }, true)).toEqual({ end: true })
    expect(nextElement(line, RUN, false)!.id).toBe(GATE)
    expect(nextElement(line, RUN, true)).toBeNull()
    expect(passOrder(line, true).map(one => one.id)).toEqual([RUN2, GATE, RUN])
  })

  it('comes back the way it went', () => {
    for (const backwards of [false, true]) {
      const places = [entryOf(passOrder(line, backwards)[0]!, backwards)]
      for (;;) {
        const here = places.at(-1)!
        const step = stepOn(line, here, backwards)!
        const next = 'to' in step ? null : nextElement(line, here.element, backwards)
        if ('end' in step && !next) break
        places.push('to' in step ? step.to : entryOf(next!, backwards))
      }
      // 4 bays, a gate, 4 bays.
      expect(places).toHaveLength(9)
      for (let at = places.length - 1; at > 0; at--) expect(stepBack(line, places[at]!, backwards)).toEqual(places[at - 1])
      expect(stepBack(line, places[0]!, backwards)).toBeNull()
    }
  })

  it('answers by bay only where the check is answered by place on a run', () => {
    const [run, gate] = [element(RUN, 'R1'), elementsOf(line)[1]!]
    expect(usualPlace(CHECKS.gap!, run, null, 3).bay).toBe(3)
    expect(usualPlace(CHECKS.gap!, gate, null, 1).bay).toBeNull()
    expect(usualPlace(CHECKS.closing!, gate, 'outer', 1)).toEqual({ face: 'outer', bay: null, from: null, height: null })
  })
})

it('keeps three readings within measuring error, and leaves them to be settled', () => {
  const round = new RoundStory()
  // 2 in at most, read with an error of 1/4 in: 2 in is within it.
  const within = { ...gap(2), uncertainty: 8_128_000 / 4 } as never
  for (let n = 0; n < 3; n++) {
    expect(oneByOne(checksOf(round)).map(one => one.check.id)).toContain('gap-below')
    const one = checkOf(round, 'gap-below')
    round.reading({ element: RUN, check: 'gap-below', place: bay(1), ...readingLinks(one, bay(1), of(round, RUN), { asideOf: nobody }) }, within)
  }
  expect(checkOf(round, 'gap-below').outcome).toMatchObject({ verdict: 'withinError' })
  // A better instrument takes their place, or they are treated as not conforming: until then nobody signs that all was read
  expect(oneByOne(checksOf(round)).map(one => one.check.id)).toContain('gap-below')
  round.reading({ element: RUN, check: 'gap-below', place: bay(1), replaces: checkOf(round, 'gap-below').outcome.heads.map(head => head.entry) }, gap(1.9))
  expect(oneByOne(checksOf(round)).map(one => one.check.id)).not.toContain('gap-below')
})

describe('what is answered once for the line', () => {
  const basis = () => basisOf({ tasks: basisOf().tasks.map(task => task.check === 'gap-below' ? { ...task, line: true as const } : task) })
  const lineOf = (round: RoundStory) => lineChecks([...round.bases.values()][0]!, outcomeOf(round)).map(one => [one.check.id, one.outcome.element, one.outcome.verdict])

  it('is a list of its own, in no element\'s list, and may be answered on any of them', () => {
    const round = new RoundStory(basis())
    expect(lineOf(round)).toEqual([['gap-below', RUN, 'notRead']])
    expect(names(oneByOne(checksOf(round)))).toEqual(['post-spacing'])
    // The second run carries it as well, with its limit, so that the worst place can be read there
    expect(checkOf(round, 'gap-below', RUN2)).toMatchObject({ line: true, limits: ['gap'], outcome: { verdict: 'notRead' } })
    expect(names(checksOf(round, GATE))).not.toContain('gap-below')
    round.reading({ element: RUN2, check: 'gap-below', place: bay(2) }, gap(1))
    expect(lineOf(round)).toEqual([['gap-below', RUN2, 'conforms']])
    expect(checkOf(round, 'gap-below', RUN)).toMatchObject({ line: true, outcome: { verdict: 'notRead' } })
  })
  it('is found by its key on an element where it was not read yet', () => {
    const round = new RoundStory(basis())
    expect(names(findingChecks([...round.bases.values()][0]!, checksOf(round, RUN2), 'outer', 'gapBelow'))).toEqual(['gap-below'])
  })
})

describe('the way from one check to the next', () => {
  it('stays with what is in the hand, goes round to what was passed over, and ends when nothing is left', () => {
    const round = new RoundStory()
    const next = (check: string) => nextLeft(checksOf(round).filter(one => !one.check.group), { check, face: null })?.check.id
    expect(next('post-spacing')).toBe('gap-below')
    expect(next('gap-below')).toBe('post-spacing')
    round.reading({ element: RUN, check: 'gap-below', place: bay(1) }, gap(1))
    round.reading({ element: RUN, check: 'post-spacing', place: whole }, look('clear'))
    expect(next('gap-below')).toBeUndefined()
  })
})
