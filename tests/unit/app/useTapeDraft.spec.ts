import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { EMPTY_DRAFT, pressTapeKey, sixteenthsText, tapeDraftOf, type TapeKey, writeTapeDraft } from '../../../app/composables/useTapeDraft'
import { parseLength } from '#shared/measure/parseLength'

const press = (...keys: TapeKey[]) => writeTapeDraft(keys.reduce(pressTapeKey, EMPTY_DRAFT))
const digits = (number: string): TapeKey[] => [...number].map(digit => ({ digit: Number(digit) }))

describe('pressTapeKey', () => {
  it('writes inches and the fraction that was touched', () => {
    expect(press(...digits('53'), { sixteenths: 10 })).toBe('53 5/8 in')
    expect(press({ sixteenths: 7 })).toBe('7/16 in')
    expect(press(...digits('53'), { sixteenths: 10 }, { sixteenths: 0 })).toBe('53 in')
  })
  it('reads the whole inch of an empty pad as none', () => {
    expect(press({ sixteenths: 0 })).toBe('0 in')
  })
  it('turns what stands into feet, and back when pressed again', () => {
    expect(press(...digits('5'), 'feet')).toBe('5\'')
    expect(press(...digits('5'), 'feet', ...digits('4'), { sixteenths: 8 })).toBe('5\' 4 1/2"')
    expect(press(...digits('5'), 'feet', 'feet')).toBe('5 in')
    expect(press('feet')).toBe('')
  })
  it('takes back what was pressed last', () => {
    expect(press(...digits('53'), { sixteenths: 10 }, 'erase')).toBe('53 in')
    expect(press(...digits('53'), { sixteenths: 10 }, 'erase', 'erase')).toBe('5 in')
    expect(press(...digits('5'), 'feet', 'erase')).toBe('5 in')
    expect(press('erase')).toBe('')
  })
  it('begins a new reading with a digit after a fraction', () => {
    expect(press(...digits('53'), { sixteenths: 10 }, ...digits('6'))).toBe('6 in')
  })
  it('takes no digit that no tape has', () => {
    expect(press(...digits('12345'))).toBe('1234 in')
    expect(press(...digits('07'))).toBe('7 in')
  })
  it('does not change the draft it is given', () => {
    const draft = Object.freeze({ ...EMPTY_DRAFT })
    expect(pressTapeKey(draft, { digit: 1 })).not.toBe(draft)
  })
})

describe('sixteenthsText', () => {
  it('is in lowest terms, as the tape is read', () => {
    expect(Array.from({ length: 16 }, (_, n) => sixteenthsText(n))).toEqual(['', '1/16', '1/8', '3/16', '1/4', '5/16', '3/8', '7/16', '1/2', '9/16', '5/8', '11/16', '3/4', '13/16', '7/8', '15/16'])
  })
})

describe('tapeDraftOf', () => {
  it('refuses what the keys cannot say', () => {
    expect(tapeDraftOf(1, false)).toBeNull() // 1/320,000 mm
    expect(tapeDraftOf(-508_000, false)).toBeNull() // -1/16 in
  })
  it('is read back by the parser as the same length', () => {
    // 1/16 in = 508,000 units (contracts.md 1: 1/64 in = 127,000).
    fc.assert(fc.property(fc.integer({ min: 0, max: 9999 * 16 }), fc.boolean(), (count, inFeet) => {
      const draft = tapeDraftOf(count * 508_000, inFeet)!
      expect(parseLength(writeTapeDraft(draft)).amount).toBe(count * 508_000)
    }))
  })
})
