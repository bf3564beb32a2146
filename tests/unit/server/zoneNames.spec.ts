import { describe, expect, it } from 'vitest'
import { instantAt, zoneNames } from '#server/services/record/zoneNames'
import { tagLetter } from '#server/services/round/takeAlong'

describe('instants at a place', () => {
  it('carry the offset of that day, in winter and in summer', () => {
    // US Eastern time: UTC-5, from the second Sunday of March to the first of November UTC-4 (15 U.S.C. 260a).
    expect(instantAt(new Date('2027-03-03T20:12:00Z'), 'America/New_York')).toBe('2027-03-03T15:12:00-05:00')
    expect(instantAt(new Date('2027-07-03T20:12:00Z'), 'America/New_York')).toBe('2027-07-03T16:12:00-04:00')
    expect(instantAt(new Date('2027-03-14T06:59:59Z'), 'America/New_York')).toBe('2027-03-14T01:59:59-05:00')
    expect(instantAt(new Date('2027-03-14T07:00:00Z'), 'America/New_York')).toBe('2027-03-14T03:00:00-04:00')
  })
  it('say +00:00 where it is so, never Z', () => {
    expect(instantAt(new Date('2027-03-03T20:12:00Z'), 'UTC')).toBe('2027-03-03T20:12:00+00:00')
  })
  it('name the offsets that the place has, and leave others as they are', () => {
    expect(zoneNames(['2027-03-03T15:12:00-05:00', '2027-07-03T16:12:00-04:00', '2027-03-03T15:12:00-08:00', '2027-03-03T15:12:00+00:00'], 'America/New_York')).toEqual({ '-05:00': 'EST', '-04:00': 'EDT', '+00:00': 'UTC' })
  })
})

describe('letters of tags', () => {
  it('leave out those that wet tape makes look like a figure, and go on with two', () => {
    const first = Array.from({ length: 30 }, (_, at) => tagLetter(at))
    expect(first.join(' ')).not.toMatch(/[IOQ]/)
    expect(new Set(first).size).toBe(30)
    expect(first[0]).toBe('A')
    expect(first.every(letter => /^[A-Z]{1,2}$/.test(letter))).toBe(true)
  })
})
