import fc from 'fast-check'
import { describe, expect, it, vi } from 'vitest'
import type { AnyEntry, KeptEntry, UnknownEntry } from '#shared/entry/entry'
import { fold } from '#shared/round/fold'
import type { RoundOutcome } from '#shared/round/outcome'
import { isEnded } from '#shared/round/outcome'
import { bay, gap, RoundStory, RUN, uuid } from '../../../helpers/roundStory'
import { deeds, written } from '../../../helpers/storyDeeds'

/** The same entries in an order that the generator chooses. */
function shuffled<T>(list: readonly T[], turns: readonly number[]): T[] {
  return list.map((one, at) => ({ one, turn: turns[at % turns.length]! * 7919 % 1009 + at / 1e6 })).sort((a, b) => a.turn - b.turn).map(({ one }) => one)
}
const turns = fc.array(fc.nat(1008), { minLength: 5, maxLength: 40 })
const RUNS = { numRuns: Number(process.env.LAW_RUNS ?? 150) }
// Properties run long on a busy machine; nothing here measures time.
vi.setConfig({ testTimeout: 120_000 })

describe('laws of the fold', () => {
  it('gives one outcome for any order, any copies and any share over devices', () => {
    fc.assert(fc.property(deeds, turns, turns, (list, one, other) => {
      const story = written(list)
      const outcome = fold(story.entries, story.bases)
      const phone = story.entries.filter((_, at) => one[at % one.length]! % 3 !== 0)
      const tablet = story.entries.filter((_, at) => one[at % one.length]! % 3 !== 1)
      expect(fold(shuffled(story.entries, one), story.bases)).toEqual(outcome)
      expect(fold(shuffled([...phone, ...tablet, ...phone], other), story.bases)).toEqual(outcome)
    }), RUNS)
  })

  it('does not change what it is given', () => {
    fc.assert(fc.property(deeds, (list) => {
      const story = written(list)
      const before = structuredClone(story.entries)
      const bases = structuredClone([...story.bases])
      fold(story.entries, story.bases)
      expect(story.entries).toEqual(before)
      expect([...story.bases]).toEqual(bases)
    }), { numRuns: 50 })
  })

  it('does not let an unknown kind change anything but `unknown`, also where others name it', () => {
    fc.assert(fc.property(deeds, fc.nat(40), (list, at) => {
      const story = written(list)
      // The entry that the newer program wrote under this id is one that others already name.
      const { envelope, digest } = story.entries[at % story.entries.length]!
      const unknown: UnknownEntry = { envelope: { ...envelope, kind: 'weighed' }, payloadText: '{}', digest, number: null }
      const rest = story.entries.filter(entry => entry.envelope.id !== envelope.id)
      const options = { basis: story.basis }
      const { unknown: named, ...outcome } = fold([...rest, unknown], story.bases, options)
      expect(named).toEqual([envelope.id])
      expect(outcome).toEqual({ ...fold(rest, story.bases, options), unknown: undefined })
    }), RUNS)
  })

  it('never throws and never loses a reading, whatever the links are', () => {
    const links = fc.array(fc.record({ answers: fc.array(fc.nat(12), { maxLength: 3 }), replaces: fc.array(fc.nat(12), { maxLength: 2 }), good: fc.boolean(), reason: fc.boolean() }), { minLength: 1, maxLength: 12 })
    fc.assert(fc.property(links, turns, (list, order) => {
      const story = new RoundStory()
      story.open()
      // The entry written n-th has the number n + 1: circles, forward links and links to nothing are all there.
      const id = (number: number) => uuid(8, number + 2)
      for (const [at, one] of list.entries()) {
        const other = (numbers: number[]) => numbers.filter(number => number !== at).map(id)
        story.reading({ element: RUN, check: 'gap-below', place: bay(1), answers: other(one.answers), replaces: other(one.replaces) }, gap(one.good ? 1 : 3), one.reason ? { reason: 'Typed wrong' } : {})
      }
      const outcome = fold(story.entries, story.bases)
      const check = outcome.checks.find(one => one.check === 'gap-below')!
      const told = [...check.heads.map(head => head.entry), ...check.earlier, ...outcome.waiting]
      expect(told.sort()).toEqual(story.entries.slice(1).map(entry => entry.envelope.id).sort())
      // Not all may replace one another away: where anything is known, something stands.
      if (outcome.waiting.length < list.length) expect(check.heads.length).toBeGreaterThan(0)
      expect(fold(shuffled(story.entries, order), story.bases)).toEqual(outcome)
    }), RUNS)
  })

  it('never ends a deficiency by a correction', () => {
    fc.assert(fc.property(deeds, (list) => {
      const story = written(list)
      const open = fold(story.entries, story.bases).deficiencies.filter(one => !isEnded(one))
      for (const one of open) story.correct([one.id])
      const after = statesOf(fold(story.entries, story.bases))
      for (const one of open) expect(after.get(one.id)?.startsWith('ended')).toBe(false)
    }), RUNS)
  })

  it('lets a finding disappear only into one of the five ends', () => {
    fc.assert(fc.property(deeds, deeds, (list, more) => {
      const all = written([...list, ...more])
      const before = fold(all.entries.slice(0, written(list).entries.length), all.bases)
      const after = statesOf(fold(all.entries, all.bases))
      for (const one of before.deficiencies) expect(after.has(one.id)).toBe(true)
    }), RUNS)
  })

  it('shows every check with an open deficiency as not conforming, and releases no element over one that must be corrected', () => {
    fc.assert(fc.property(deeds, (list) => {
      const story = written(list)
      const outcome = fold(story.entries, story.bases)
      for (const one of outcome.deficiencies.filter(one => !isEnded(one))) {
        expect(outcome.checks.filter(check => check.element === one.element && check.check === one.check).map(check => check.verdict)).toContain('doesNotConform')
        const element = outcome.elements.find(found => found.element === one.element)!
        expect(element.verdict).toBe('doesNotConform')
        if (one.class !== 'ownerMayAccept') expect(element.released).toBe(false)
        if (one.class === 'outOfUse') expect(element.outOfUse).toBe(true)
      }
      expect(Object.values(outcome.tally).reduce((sum, one) => sum + one, 0)).toBe(outcome.checks.length)
    }), RUNS)
  })

  it('does not read ids, clocks, devices or numbers of acceptance', () => {
    fc.assert(fc.property(deeds, turns, (list, order) => {
      const story = written(list)
      const ids = story.entries.map(entry => entry.envelope.id)
      const renamed = new Map(shuffled(ids, order).map((id, at) => [ids[at]!, id]))
      const rename = <T>(value: T): T => JSON.parse(ids.reduce((text, id) => text.replaceAll(id, `<${id}>`), JSON.stringify(value)).replace(/<([^>]*)>/g, (_, id: string) => renamed.get(id)!)) as T
      const others = story.entries.map((entry, at): AnyEntry => ({ ...rename(entry), number: ids.length - at, digest: entry.digest }))
      for (const entry of others) {
        entry.envelope.madeAt = '2001-01-01T00:00:00Z'
        entry.envelope.device = uuid(5, 9)
      }
      const named = fold(others, story.bases)
      const outcome = fold(story.entries, story.bases)
      expect(meaningOf(named)).toEqual(meaningOf(rename(outcome)))
    }), RUNS)
  })
})

function statesOf(outcome: RoundOutcome): Map<string, string> {
  return new Map(outcome.deficiencies.map(one => [one.id, one.state]))
}

/** The outcome without what is only an order for the eye, and without the device's clock, which it merely shows. */
function meaningOf(outcome: RoundOutcome): unknown {
  const sorted = (value: unknown): unknown => {
    if (Array.isArray(value)) return value.map(sorted).sort((a, b) => JSON.stringify(a) < JSON.stringify(b) ? -1 : 1)
    if (typeof value !== 'object' || value === null) return value
    return Object.fromEntries(Object.entries(value).filter(([key]) => key !== 'madeAt').map(([key, inner]) => [key, sorted(inner)]))
  }
  return sorted(outcome)
}

it('is given entries by a generator that reaches every state and end', () => {
  const seen = new Set<string>()
  const list: readonly KeptEntry[][] = fc.sample(deeds, { numRuns: 600, seed: 41 }).map(one => written(one).entries)
  const { bases } = new RoundStory()
  for (const entries of list) {
    const outcome = fold(entries, bases)
    for (const one of outcome.deficiencies) seen.add(one.state)
    for (const one of outcome.ignored) seen.add(one.why)
    for (const one of outcome.refusedLinks) seen.add(one.why)
    for (const check of outcome.checks) if (check.readAgain) seen.add('readAgain')
    for (const check of outcome.checks) for (const head of check.heads) if (head.overruledBy) seen.add('overruled')
  }
  for (const state of ['open', 'assigned', 'corrected', 'disputed', 'endedCorrected', 'endedAccepted', 'endedDecided', 'endedReferred', 'endedInError', 'fallen', 'classDoesNotAllow', 'noReason', 'doesNotDisturb', 'readAgain', 'overruled']) expect(seen).toContain(state)
})
