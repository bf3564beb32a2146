import { describe, expect, it } from 'vitest'
import { readDay, splitMoment, writeDay } from '../../../app/composables/useMoment'

describe('writeDay', () => {
  it('writes day, month and year as each language does', () => {
    expect(writeDay('2027-03-03', 'en')).toBe('3 Mar 2027')
    expect(writeDay('2027-03-03', 'es')).toBe('3 mar 2027')
  })
  it('names the weekday: 5 March 2027 is a Friday', () => {
    // Anchor: 1 January 2000 was a Saturday; 9925 days later is 9925 mod 7 = 6 days further, a Friday.
    expect(writeDay('2027-03-05', 'en', 'weekday')).toBe('Fri 5 Mar')
    expect(writeDay('2027-03-05', 'es', 'weekday')).toBe('vie 5 mar')
  })
  it('leaves alone what is no day', () => {
    expect(writeDay('2027-02-30', 'en')).toBe('2027-02-30')
    expect(writeDay('soon', 'en')).toBe('soon')
  })
})

describe('readDay', () => {
  it.each(['5 Mar 2027', '5 mar 2027', '05 March 2027', 'March 5, 2027', '5 de marzo de 2027', '2027-03-05', ' 5  mar. 2027 '])('reads %j', (typed) => {
    expect(readDay(typed)).toEqual({ ok: true, day: '2027-03-05' })
  })
  it('tells Spanish months apart from English ones', () => {
    expect(readDay('1 ene 2027')).toEqual({ ok: true, day: '2027-01-01' })
    expect(readDay('9 ago 2027')).toEqual({ ok: true, day: '2027-08-09' })
    expect(readDay('24 dic 2027')).toEqual({ ok: true, day: '2027-12-24' })
  })
  it('asks instead of guessing between two days', () => {
    expect(readDay('3/5/2027')).toEqual({ ok: false, why: 'twoWays' })
    expect(readDay('13/5/2027')).toEqual({ ok: true, day: '2027-05-13' })
    expect(readDay('5/13/2027')).toEqual({ ok: true, day: '2027-05-13' })
    expect(readDay('4/4/2027')).toEqual({ ok: true, day: '2027-04-04' })
  })
  it('refuses days that the calendar has not', () => {
    expect(readDay('29 Feb 2027')).toEqual({ ok: false, why: 'noSuchDay' })
    expect(readDay('29 Feb 2028')).toEqual({ ok: true, day: '2028-02-29' })
    expect(readDay('31/4/2027')).toEqual({ ok: false, why: 'noSuchDay' })
  })
  it('refuses what it cannot read', () => {
    for (const typed of ['', 'Friday', '5 Foo 2027', '5 Mar 27', '5 m 2027']) expect(readDay(typed)).toEqual({ ok: false, why: 'unreadable' })
  })
})

describe('splitMoment', () => {
  it('carries the zone of the place', () => {
    // Eastern time is UTC-5 before the second Sunday of March (14 March 2027) and UTC-4 after it.
    expect(splitMoment('2027-03-03T20:12:00Z', 'America/New_York')).toEqual({ day: '2027-03-03', time: '15:12 EST' })
    expect(splitMoment('2027-03-15T20:12:00Z', 'America/New_York')).toEqual({ day: '2027-03-15', time: '16:12 EDT' })
  })
  it('changes the day with the zone and writes midnight as 00', () => {
    expect(splitMoment('2027-03-04T02:00:00Z', 'America/New_York')).toEqual({ day: '2027-03-03', time: '21:00 EST' })
    expect(splitMoment('2027-03-04T05:00:00Z', 'America/New_York')).toEqual({ day: '2027-03-04', time: '00:00 EST' })
  })
  it('answers nothing for what is no instant or no zone', () => {
    expect(splitMoment('yesterday', 'UTC')).toBeNull()
    expect(splitMoment('2027-03-04T05:00:00Z', 'Nowhere/Town')).toBeNull()
  })
})
