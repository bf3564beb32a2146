import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { answered, graceLeft, nextBatch, nextTagNumber, outboxOrder, pauseAfter, PUSH_PHOTOS, tagNumber, type Waiting } from '~/offline/outbox'

const one = (seq: number, more: Partial<Waiting> = {}): Waiting => ({ seq, id: `id${seq}`, round: 'r', kind: 'reading', names: [], photos: [], size: 100, ...more })

describe('what goes first', () => {
  it('is what was written first', () => {
    expect(outboxOrder([one(3), one(1), one(2)]).map(row => row.seq)).toEqual([1, 2, 3])
  })
  it('is what speaks of danger, with the reading that it names, and nothing else', () => {
    const order = outboxOrder([one(1), one(2), one(3, { kind: 'dangerNow', names: ['id2'] }), one(4)])
    expect(order.map(row => row.seq)).toEqual([2, 3])
  })
  it('does not wait for a reading that has gone already', () => {
    expect(outboxOrder([one(1), one(9, { kind: 'dangerNow', names: ['gone'] })]).map(row => row.seq)).toEqual([9])
  })
  it('follows what is named by what is named, and comes to an end where two name each other', () => {
    const order = outboxOrder([one(1, { names: ['id2'] }), one(2, { names: ['id1'] }), one(3, { kind: 'dangerNow', names: ['id1'] }), one(4)])
    expect(order.map(row => row.seq)).toEqual([1, 2, 3])
  })
})

describe('a push', () => {
  const rows = fc.array(fc.record({ size: fc.integer({ min: 1, max: 60 }), photos: fc.integer({ min: 0, max: 14 }), round: fc.constantFrom('r', 's') }), { minLength: 1, maxLength: 30 })
    .map(list => list.map((row, at) => one(at, { ...row, photos: Array.from({ length: row.photos }, (_, n) => `${at}-${n}`) })))
  it('fits into the 25 MB that the server reads of one request, whatever script it is written in', () => {
    // The longest entry that is taken at all (shared/entry/entry.ts: 20,000 and 2,200,000), in signs of three bytes and in quotes that are escaped twice.
    for (const sign of ['犬', '"']) {
      const text = JSON.stringify(sign.repeat(2_200_000)).slice(0, 2_200_000)
      expect(Buffer.byteLength(JSON.stringify({ device: 'd', entries: [{ envelope: sign.repeat(20_000), payload: text }], empty: false }))).toBeLessThan(25_000_000)
    }
    // Longer ones never ride together.
    expect(nextBatch([one(1, { size: 900_000 }), one(2, { size: 900_000 })])).toHaveLength(1)
  })
  it('is of one round, from its head, without a gap, within its bounds, and never empty', () => {
    fc.assert(fc.property(rows, fc.integer({ min: 1, max: 8 }), (list, most) => {
      const batch = nextBatch(list, most, 100)
      const sameRound = list.filter(row => row.round === list[0]!.round)
      expect(batch).toEqual(sameRound.slice(0, batch.length))
      expect(batch.length).toBeGreaterThan(0)
      const within = (some: Waiting[]) => some.length <= most && some.reduce((sum, row) => sum + row.size, 0) <= 100 && some.reduce((sum, row) => sum + row.photos.length, 0) <= PUSH_PHOTOS
      if (batch.length > 1) expect(within(batch)).toBe(true)
      // And it is as long as it may be.
      if (batch.length < sameRound.length) expect(within(sameRound.slice(0, batch.length + 1))).toBe(false)
    }))
  })
})

describe('an answer', () => {
  // RFC 9110 (statuses), RFC 8470 5.2 (425), RFC 6585 4 (429): these may be otherwise the next time.
  it.each([[0, 'again'], [302, 'again'], [408, 'again'], [425, 'again'], [429, 'again'], [500, 'again'], [503, 'again'], [200, 'through'], [204, 'through'], [401, 'pause'], [403, 'pause'], [400, 'no'], [404, 'no'], [409, 'no'], [410, 'no'], [413, 'no'], [415, 'no'], [422, 'no']] as const)('%i means %s', (status, means) => {
    expect(answered(status)).toBe(means)
  })
})

describe('the pause after failures', () => {
  it('grows, is spread, and ends growing at five minutes', () => {
    expect([1, 2, 3, 4, 5, 6, 7, 8, 50].map(failures => pauseAfter(failures, 0.5))).toEqual([2, 5, 15, 30, 60, 120, 300, 300, 300].map(seconds => seconds * 1000))
    expect(pauseAfter(1, 0)).toBe(1500)
    expect(pauseAfter(1, 1)).toBe(2500)
  })
  it('is at least what the server asks, and never beyond an hour for it', () => {
    expect(pauseAfter(1, 0, 40)).toBe(40_000)
    expect(pauseAfter(1, 0, 1_000_000)).toBe(3_600_000)
  })
})

describe('the grace in which an answer can be taken back', () => {
  it('runs from the last word, and from the first no longer than a minute', () => {
    expect(graceLeft(1_000, 1_000, 1_000)).toBe(10_000)
    expect(graceLeft(50_000, 0, 50_000)).toBe(10_000)
    expect(graceLeft(58_000, 0, 58_000)).toBe(2_000)
    expect(graceLeft(90_000, 0, 1_000)).toBe(0)
  })
})

describe('the number of a tag', () => {
  it('counts for its own letter alone', () => {
    expect([tagNumber('B16', 'B'), tagNumber('B16', 'A'), tagNumber('AB3', 'A'), tagNumber('AB3', 'AB'), tagNumber('B', 'B')]).toEqual([16, 0, 0, 3, 0])
  })
  it('is after all that are known of, from wherever', () => {
    expect(nextTagNumber('B', ['B2', 'A9', 'BB40'])).toBe(3)
    expect(nextTagNumber('B', ['B2'], 7, 5)).toBe(8)
    expect(nextTagNumber('B', [])).toBe(1)
  })
})
