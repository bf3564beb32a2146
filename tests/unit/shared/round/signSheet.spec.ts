import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import type { AnyEntry } from '#shared/entry/entry'
import { readEntry } from '#shared/entry/readEntry'
import { digestOf } from '#shared/record/canonicalJson'
import type { RoundBasis } from '#shared/round/basis'
import { fold } from '#shared/round/fold'
import { lateEffect } from '#shared/round/lateEffect'
import { outcomeSentence } from '#shared/round/outcomeSentence'
import { readyToSign } from '#shared/round/readyToSign'
import type { SignerStatement } from '#shared/round/signSheet'
import { checkSignSheet, makeSignSheet } from '#shared/round/signSheet'
import { bay, gap, GATE, look, PEOPLE, RoundStory, RUN, RUN2, trial, uuid } from '../../../helpers/roundStory'

/** Outcome worked by hand; texts and digests written by another program (Python's json and hashlib). */
const golden = JSON.parse(readFileSync(new URL('../../../fixtures/contracts/sign-sheet-v1.json', import.meta.url), 'utf8')) as {
  basis: RoundBasis, basisDigest: string, entries: { envelope: string, payload: string, digest: string }[], statement: SignerStatement
  outcome: { checks: object[], elements: object[], deficiencies: object[] }, sheet: string, digest: string, ids: Record<string, string>
}
const bases = new Map([[golden.basisDigest, golden.basis]])
const entries = golden.entries.map(wire => (readEntry(wire) as { entry: AnyEntry }).entry)

describe('the golden round', () => {
  it('folds to what was worked by hand', () => {
    expect(digestOf(golden.basis)).toBe(golden.basisDigest)
    expect(entries.map(entry => entry.digest)).toEqual(golden.entries.map(entry => entry.digest))
    const outcome = fold(entries, bases)
    expect(outcome.checks).toMatchObject(golden.outcome.checks)
    expect(outcome.elements).toMatchObject(golden.outcome.elements)
    expect(outcome.deficiencies).toMatchObject(golden.outcome.deficiencies)
    const { ids } = golden
    expect(outcome.checks[0]).toMatchObject({ heads: [{ entry: ids.tiesAgain }], earlier: [ids.tiesOuter], disturbedBy: [] })
    expect(outcome.checks[1]).toMatchObject({ heads: [{ entry: ids.tiesInner }], disturbedBy: [ids.correction] })
    // 1 7/8 in and 1 1/4 in under a limit of 2 in leave 1/8 in and 3/4 in; the nearer one governs.
    expect(outcome.checks[2]).toMatchObject({ governs: ids.gapAgain, heads: [{ margin: 1_016_000, limit: 'gap' }, { entry: ids.gapBay1, margin: 6_096_000 }], earlier: [ids.gapBay2] })
    expect(outcome.deficiencies[0]).toMatchObject({ history: [ids.gapBay2, ids.correction, ids.gapAgain] })
    expect(outcome.deficiencies[1]).toMatchObject({ held: 'attended' })
    expect(outcome.ignored).toEqual([])
  })

  it('makes the sheet that another program wrote, byte for byte', () => {
    const sheet = makeSignSheet(entries, fold(entries, bases), golden.basis, golden.statement)
    expect(sheet).toEqual({ text: golden.sheet, digest: golden.digest })
    expect(makeSignSheet([...entries].reverse(), fold(entries, bases), golden.basis, golden.statement)).toEqual(sheet)
  })

  it('checks out over the same entries, and tells what is missing, late, erased or told otherwise', () => {
    expect(checkSignSheet(golden.sheet, entries, bases)).toMatchObject({ digest: golden.digest, missing: [], late: [], differs: [], erased: [] })
    const [first] = entries
    expect(checkSignSheet(golden.sheet, entries.slice(1), bases)).toMatchObject({ missing: [first!.digest], differs: [] })
    const later: AnyEntry = { ...first!, digest: 'a'.repeat(64), envelope: { ...first!.envelope, id: uuid(9, 9) } } as AnyEntry
    expect(checkSignSheet(golden.sheet, [...entries, later], bases)).toMatchObject({ late: [uuid(9, 9)], differs: [] })
    expect(checkSignSheet(golden.sheet, entries.map(entry => entry === entries[5] ? { ...entry, payload: null } as AnyEntry : entry), bases)).toMatchObject({ missing: [], differs: [], erased: [golden.ids.gapBay2] })
    const better = golden.sheet.replace('"state":"open"', '"state":"endedCorrected"')
    expect(checkSignSheet(better, entries, bases).differs).toEqual(['deficiencies'])
    const without = golden.sheet.replace('"readAgain":true', '"readAgain":false')
    expect(checkSignSheet(without, entries, bases).differs).toEqual(['checks'])
  })

  it('is told in one sentence', () => {
    expect(outcomeSentence(fold(entries, bases))).toEqual({ released: 0, elements: 2, attended: [], outOfUse: [], open: 1, openTags: ['A2'], notInspected: [] })
  })

  it('refuses texts that are no sheet', () => {
    expect(() => checkSignSheet(golden.sheet.replace(',', ', '), entries, bases)).toThrow(expect.objectContaining({ code: 'notCanonical' }))
    expect(() => checkSignSheet('{"version":1}', entries, bases)).toThrow(expect.objectContaining({ name: 'ZodError' }))
  })
})

const story = () => {
  const it = new RoundStory()
  it.open()
  return it
}
/** Everything read and in order. */
function finished(): RoundStory {
  const it = story()
  for (const element of [RUN, RUN2]) {
    it.reading({ element, check: 'tie-ends' }, look('clear'))
    it.reading({ element, check: 'gap-below' }, gap(1))
    it.reading({ element, check: 'post-spacing' }, look('clear'))
  }
  it.reading({ element: GATE, check: 'tie-ends' }, look('clear'))
  it.reading({ element: GATE, check: 'self-closing' }, trial(3))
  return it
}
const foldOf = (it: RoundStory) => fold(it.entries, it.bases)
const reasons = (it: RoundStory, scope: 'interim' | 'final') => readyToSign(foldOf(it), scope)

describe('what stands against signing', () => {
  it('is nothing when all is read and nothing is open', () => {
    expect(reasons(finished(), 'final')).toEqual({ ready: true, reasons: [] })
    expect(foldOf(finished()).elements.every(one => one.released)).toBe(true)
  })

  it('is open work for a final record; an interim one lists it', () => {
    const it = finished()
    const bad = it.reading({ element: GATE, check: 'self-closing', place: { face: 'outer', bay: null, from: null, height: null } }, trial(1))
    const interim = reasons(it, 'interim')
    expect(interim.ready).toBe(true)
    expect(interim.reasons).toMatchObject([{ why: 'openDeficiency', stops: false, deficiency: bad, element: GATE }, { why: 'notHeld', deficiency: bad }])
    expect(reasons(it, 'final').ready).toBe(false)
    it.write('dangerNow', { done: 'attended', told: { account: null, name: 'Bea Lund' }, toldAt: '2026-11-30T09:15:00-05:00', photos: [] }, it.about([bad]))
    expect(reasons(it, 'interim').reasons.map(one => one.why)).toEqual(['openDeficiency'])
  })

  it('is what was not read, is to be read again, or lies within measuring error', () => {
    expect(reasons(story(), 'final').reasons.map(one => one.why)).toEqual(Array(8).fill('notRead'))
    const it = finished()
    const near = it.reading({ element: RUN, check: 'gap-below', place: bay(1) }, { method: 'measure', amount: 2 * 8_128_000 - 1000, text: '2 in', system: 'imperial', uncertainty: 127_000 })
    expect(reasons(it, 'final').reasons).toMatchObject([{ why: 'measureAgain', entries: [near] }])
    const fixed = it.correct([it.reading({ element: RUN2, check: 'gap-below', place: bay(1) }, gap(3))])
    expect(reasons(it, 'final').reasons.filter(one => one.why === 'readAgain')).toMatchObject([{ element: GATE, entries: [fixed] }, { element: RUN2, entries: [fixed] }])
  })

  it('is an element that nobody looked at, and what is not yet inspected; no access with a reason is a reason', () => {
    const it = story()
    for (const element of [RUN, GATE, RUN2]) it.write('setAside', { as: 'notInspected', why: 'noAccess', photos: [] }, { element })
    expect(reasons(it, 'final').reasons.map(one => [one.why, one.element])).toEqual([['nobodyLooked', RUN], ['nobodyLooked', GATE], ['nobodyLooked', RUN2]])
    it.reading({ element: RUN, check: 'tie-ends' }, look('clear'))
    expect(reasons(it, 'final').reasons.map(one => one.element)).toEqual([GATE, RUN2])
  })

  it('is, for any record, what these rules do not know, what waits, and what a person must settle', () => {
    const it = finished()
    const bad = it.reading({ element: RUN, check: 'gap-below', place: bay(2) }, gap(3))
    const fixed = it.correct([bad])
    const unknown = { envelope: { ...it.entries[1]!.envelope, id: uuid(9, 1), kind: 'weighed' }, payloadText: '{}', digest: 'f'.repeat(64), number: null }
    const outcome = fold([...it.entries.filter(entry => entry.envelope.id !== bad), unknown], it.bases)
    expect(readyToSign(outcome, 'interim')).toMatchObject({ ready: false, reasons: [{ why: 'unknownEntries', stops: true, entries: [uuid(9, 1)] }, { why: 'entriesWaiting', entries: [fixed] }] })
    expect(() => makeSignSheet(it.entries, outcome, it.bases.get(it.basis)!, golden.statement)).toThrow(expect.objectContaining({ code: 'notReady' }))
  })

  it('is a presence that does not fit how the signer is known', () => {
    const it = finished()
    expect(() => makeSignSheet(it.entries, foldOf(it), it.bases.get(it.basis)!, { ...golden.statement, presence: null })).toThrow(expect.objectContaining({ code: 'presence' }))
    expect(() => makeSignSheet([], foldOf(it), it.bases.get(it.basis)!, golden.statement)).toThrow(expect.objectContaining({ code: 'noEntries' }))
  })
})

describe('entries that come after the set was signed', () => {
  const late = (write: (it: RoundStory) => void, it = finished()) => {
    const signed = foldOf(it)
    write(it)
    return lateEffect(signed, foldOf(it)).map(one => one.why)
  }

  it('are harmless when they are notes, better readings or words about who does what', () => {
    expect(late(it => it.write('note', { words: 'Dry day', photos: [] }, { element: RUN }))).toEqual([])
    expect(late(it => it.reading({ element: RUN, check: 'gap-below', place: bay(1) }, gap(0.5)))).toEqual([])
    const it = finished()
    const bad = it.reading({ element: RUN, check: 'gap-below', place: bay(1) }, gap(3))
    expect(late(() => it.assign([bad]), it)).toEqual([])
    const open = story()
    expect(late(() => open.reading({ element: RUN, check: 'tie-ends' }, look('clear')), open)).toEqual([])
  })

  it('are adverse when they find something, also something that has ended since', () => {
    expect(late(it => it.reading({ element: RUN, check: 'gap-below', place: bay(1) }, gap(3)))).toEqual(['finding', 'worseReading', 'notReleased'])
    expect(late(it => it.inError(it.reading({ element: RUN, check: 'gap-below', place: bay(1) }, gap(3))))).toEqual(['finding'])
  })

  it('are adverse when they reopen, disturb, change the basis or cannot be told', () => {
    const it = finished()
    const bad = it.reading({ element: RUN, check: 'post-spacing', place: bay(1) }, look('finding'))
    const yes = it.accept([bad])
    expect(late(() => it.accept([bad], false), it)).toContain('reopened')
    expect(yes).toBeTruthy()
    const open = finished()
    const gapThere = open.reading({ element: RUN, check: 'gap-below', place: bay(1) }, gap(3))
    expect(late(() => open.correct([gapThere]), open)).toContain('readAgain')
    expect(late((one) => {
      const digest = one.hold({ ...one.bases.get(one.basis)!, limits: {}, tasks: [] })
      one.write('basisChanged', { basis: digest, why: 'Other limits' }, { basis: digest, author: PEOPLE.manager })
    })).toContain('otherBasis')
    expect(late(one => one.reading({ element: RUN, check: 'gap-below', answers: [uuid(9, 77)] }, gap(1)))).toEqual(['cannotTell'])
  })
})
