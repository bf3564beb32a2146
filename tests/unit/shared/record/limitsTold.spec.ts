import { beforeAll, describe, expect, it } from 'vitest'
import type { Limit } from '#shared/limit/limit'
import { INCH } from '#shared/measure/length'
import type { Provision } from '#shared/provision/provision'
import type { RecordCheck, RecordDocument } from '#shared/record/record'
import { conditionsOf, tellingOf } from '#shared/record/recordWords'
import { sampleRecord } from '../../../helpers/sampleRecord'

let record: RecordDocument
let check: RecordCheck
beforeAll(async () => {
  record = (await sampleRecord({ photos: 0, looks: 2 })).record
  check = record.checks.find(one => one.measurand === 'gap-below' && one.readings.length > 0)!
})

const limit = (id: string, kind: Limit['basis']['kind'], high: number, name: string): Limit => ({ id, measurand: 'gap-below', datum: 'ground', unit: 'length', low: null, high: { imperial: high * INCH, inclusive: true }, avoid: null, basis: { kind, name, citation: '3.1' } })
const provision = (id: string, kind: Provision['kind'], effect: Provision['effect']): Provision => ({ id, kind, measurand: 'gap-below', setting: null, effect, limit: { datum: 'ground', unit: 'length', low: null, high: { imperial: 3 * INCH, inclusive: true }, avoid: null }, name: 'x', citation: 'x', confirmedBy: 'x', confirmedOn: '2026-11-02' })
const told = (limits: Limit[], more: Partial<RecordDocument> = {}, governs = limits[0]!.id, language: 'en' | 'es' = 'en') => {
  const held = { ...record, limits: Object.fromEntries(limits.map(one => [one.id, one])), limitsSetAside: [], provisions: [], ...more } as RecordDocument
  return conditionsOf({ ...check, limits: limits.map(one => one.id), readings: [{ ...check.readings[0]!, limit: governs }] }, tellingOf(held, language))
}
const [guide, town, spec] = [limit('guide', 'builtIn', 2, 'A guideline'), limit('town', 'authority', 3, 'Town of Example'), limit('spec', 'specification', 3, 'A specification')]

describe('a reading on paper and screen tells of its limits', () => {
  it('nothing more where one limit stands alone', () => {
    expect(told([guide])).toEqual([])
  })
  it('which of several governs', () => {
    expect(told([guide, town])).toEqual(['governs: at most 2 in over the ground (A guideline)'])
    expect(told([guide, town], {}, 'town')).toEqual(['governs: at most 3 in over the ground (Town of Example)'])
    expect(told([guide, town], {}, 'guide', 'es')[0]).toMatch(/^rige: /)
  })
  it('what another limit put aside, and only where that one holds', () => {
    const limitsSetAside = [{ limit: guide, by: 'town', why: 'replaced' as const }, { limit: guide, by: 'elsewhere', why: 'looser' as const }]
    expect(told([town], { limitsSetAside })).toEqual(['at most 2 in over the ground (A guideline, 3.1): replaced by the limit above'])
  })
  it('what a specification wanted to loosen and could not; an authority is no such case', () => {
    expect(told([guide, spec], { provisions: [provision('spec', 'specification', 'replace')] })).toEqual([
      'governs: at most 2 in over the ground (A guideline)', 'A specification wanted to stand in place of A guideline; only an authority may loosen that, so both hold',
    ])
    expect(told([guide, spec], { provisions: [provision('spec', 'specification', 'add')] })).toHaveLength(1)
    expect(told([guide, town], { provisions: [provision('town', 'authority', 'replace')] })).toHaveLength(1)
  })
})
