import { describe, expect, it } from 'vitest'
import type { RecordStep } from '#shared/record/record'
import { Speech } from '#shared/record/speech'
import { stepWords } from '#shared/record/recordWords'
import { WORDING } from '#shared/record/wording'

const say = (language: 'en' | 'es') => ({ say: new Speech({ wording: WORDING[language], system: 'imperial', zones: {} }) })
const step = (amount: number, text: string, system: 'imperial' | 'metric' = 'imperial') => ({ kind: 'reading', erased: false, words: null, person: null, by: 'Dana', value: { method: 'measure', amount, text, system } }) as unknown as RecordStep

// Amounts by hand: 1/1000 s, 1/1000 degree, 1/1000 lbf or N, 1/320,000 mm (8,128,000 an inch).
describe('the reading that a deficiency begins with', () => {
  it.each([
    ['time', 2500, '2.5 s', 'imperial', '2.5 s'],
    ['force', 17_500, '17.5 lbf', 'imperial', '17.5 lbf'],
    ['force', 70_000, '70 N', 'metric', '70 N'],
    ['angle', 3250, '3.25°', 'imperial', '3.25°'],
    ['length', 40_640_000, '5 in', 'imperial', '5 in'],
  ] as const)('is told in its own unit: %s', (unit, amount, typed, system, told) => {
    expect(stepWords(say('en'), step(amount, typed, system), 0, unit).replaceAll('\u00a0', ' ')).toContain(told)
    expect(stepWords(say('es'), step(amount, typed, system), 0, unit).replaceAll('\u00a0', ' ')).toContain(told)
  })

  it('is told as it was typed where its check is not known any more', () => {
    expect(stepWords(say('en'), step(2500, '2.5 s'), 0, null)).toContain('2.5 s')
  })
})
