import { describe, expect, it } from 'vitest'
import { readUncertainty } from '~/composables/useInstruments'

describe('an uncertainty as it is written', () => {
  // By hand: 1 in = 8,128,000 units, 1 mm = 320,000; angles, times and forces in thousandths
  it.each([
    ['1/16 in', 'length', 508_000, '1/16 in'],
    ['± 0.02 in', 'length', 162_560, '0.02 in'],
    ['1.5 mm', 'length', 480_000, '1.5 mm'],
    ['0.2', 'angle', 200, '0.2°'],
    ['0.25', 'time', 250, '0.25 s'],
    ['2', 'force', 2000, '2 lbf'],
  ] as const)('%s of a %s', (written, unit, uncertainty, text) => {
    expect(readUncertainty(written, unit)).toEqual({ uncertainty, text })
  })
  it('is refused where it is no length, none at all, or has no unit of its own', () => {
    expect(readUncertainty('1/16', 'length')).toMatchObject({ refused: 'noUnit' })
    expect(readUncertainty('good', 'length')).toHaveProperty('refused')
    for (const bad of ['0', '', 'half', '-1', '0.0001']) expect(readUncertainty(bad, 'angle')).toEqual({ refused: 'notANumber', parameters: {} })
    expect(readUncertainty('0 in', 'length')).toHaveProperty('refused')
  })
})
