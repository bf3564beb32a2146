import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { PIPE_SIZES } from '#shared/count/pipeSizes'
import { fewestFasteners } from '#shared/count/spacing'
import { tensionBandHints } from '#shared/count/tensionBandHints'
import { parseLength } from '#shared/measure/parseLength'

const length = (text: string) => parseLength(text).amount
const statements: { id: string, inches: number | null, statement: string }[] = JSON.parse(readFileSync(new URL('../../templates/facts/published-limits.json', import.meta.url), 'utf8'))
const inches = (id: string) => length(`${statements.find(one => one.id === id)!.inches} in`)

describe('counts against published limits', () => {
  // Spacings as published; the counts over a ten-foot bay (F01) and a six-foot post are OWN, by hand.
  it.each([
    ['ties on a line post of 6 ft, at most 15 in apart (F05)', '6 ft', 'F05', 6],
    ['ties on a rail of 10 ft, at most 24 in apart (F06)', '10 ft', 'F06', 6],
    ['ties on a tension wire of 10 ft, about 18 in apart (F09)', '10 ft', 'F09', 8],
    ['bands on a leaf of 6 ft, 12 in apart (F10)', '6 ft', 'F10', 7],
  ])('%s', (_, span, fact, count) => {
    expect(fewestFasteners(length(span), { spacing: inches(fact), start: 0, end: 0 })).toBe(count)
  })

  it('five bands hold a six-foot leaf at 15 in with 6 in at the ends, as common practice has it (F14, F15)', () => {
    expect(fewestFasteners(length('6 ft'), { spacing: inches('F14'), start: length('6 in'), end: length('6 in') })).toBe(5)
    expect(tensionBandHints(length('6 ft'))[0]).toEqual({ rule: 'feetLessOne', bands: 5 })
  })

  it.each([['1', 'F50'], ['1-1/4', 'F51'], ['1-1/2', 'F52'], ['2', 'F53'], ['2-1/2', 'F54'], ['3', 'F55'], ['3-1/2', 'F56']])('pipe of NPS %s is as thick as published (%s)', (nps, fact) => {
    expect(PIPE_SIZES.find(size => size.nps === nps)?.outsideDiameter).toBe(inches(fact))
  })
})
