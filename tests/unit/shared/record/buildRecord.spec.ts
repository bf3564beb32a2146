import { readFileSync } from 'node:fs'
import { beforeAll, describe, expect, it } from 'vitest'
import { buildRecord, type RecordSources } from '#shared/record/buildRecord'
import { canonicalJson, parseCanonicalJson, sha256Hex } from '#shared/record/canonicalJson'
import { anyRecordSchema, recordSchema } from '#shared/record/record'
import { askedOf, tellingOf } from '#shared/record/recordWords'
import { sampleRecord, type Sample } from '../../../helpers/sampleRecord'

/**
 * Frozen: record.json v1 as it was first built, and the sources that it was built from. A change of the format is a version 2 beside it; neither file is
 * ever made again.
 */
const frozen = (name: string) => readFileSync(new URL(`../../../fixtures/contracts/${name}`, import.meta.url), 'utf8')
const GOLDEN_DIGEST = 'ac664c057447df1328e1747a4d5f51767ba7503de7d22542fccc46bd4f4f0256'

const GOLDEN_DIGEST_V2 = '228c94e77cfce2bc11d3e2d04270e53991b6480c8e2845a321f8412c31f8405b'

let sample: Sample
beforeAll(async () => {
  sample = await sampleRecord({ photos: 0, looks: 2 })
})

describe('record.json v1', () => {
  it('is, for the golden sources, the golden bytes', () => {
    const golden = frozen('record-v1.json')
    expect(sha256Hex(golden)).toBe(GOLDEN_DIGEST)
    expect(canonicalJson(buildRecord(JSON.parse(frozen('record-v1-sources.json')) as RecordSources))).toBe(golden)
  })
  it('is read back by the schema for ever, unchanged', () => {
    const text = frozen('record-v1.json')
    const value = parseCanonicalJson(text)
    expect(canonicalJson(recordSchema.parse(value))).toBe(text)
  })
  it('refuses anything that it does not know', () => {
    expect(recordSchema.safeParse({ ...sample.record, more: 1 }).success).toBe(false)
    expect(recordSchema.safeParse({ ...sample.record, version: 2 }).success).toBe(false)
  })
})

describe('record.json v2', () => {
  const sources = () => JSON.parse(frozen('record-v1-sources.json')) as RecordSources
  const more: Pick<RecordSources, 'answers' | 'notPut'> = {
    answers: [{
      words: 'Which holds at G3: 54 in over the leaf, or 54 in over the ground?', askedOf: 'Velmor County', askedOn: '2027-02-24',
      answer: { name: 'R. Tamm', role: 'Building official', on: '2027-03-02', document: 'Letter BD-27-118', words: 'From the ground.' },
    }],
    notPut: ['May the landing at G3 be raised?'],
  }
  it('is, for the golden sources with an answer, the golden bytes, read back unchanged', () => {
    const golden = frozen('record-v2.json')
    expect(sha256Hex(golden)).toBe(GOLDEN_DIGEST_V2)
    expect(canonicalJson(buildRecord({ ...sources(), ...more }))).toBe(golden)
    expect(canonicalJson(anyRecordSchema.parse(parseCanonicalJson(golden)))).toBe(golden)
  })
  it('is version 1 with what was settled beside it, and nothing else', () => {
    const { version, answers, notPut, ...rest } = JSON.parse(frozen('record-v2.json')) as Record<string, unknown>
    expect({ version: 1, ...rest }).toEqual(JSON.parse(frozen('record-v1.json')))
    expect({ version, answers, notPut }).toEqual({ version: 2, ...more })
  })
  it('is written only where a question was settled or not put to anybody', () => {
    expect(buildRecord({ ...sources(), answers: [], notPut: [] }).version).toBe(1)
    expect(buildRecord({ ...sources(), notPut: more.notPut! }).version).toBe(2)
  })
  it('is told with name, date and document; a record of version 1 says that nothing waits', () => {
    const told = askedOf(tellingOf(buildRecord({ ...sources(), ...more })))
    expect(told.at(-1)).toBe('Which holds at G3: 54 in over the leaf, or 54 in over the ground? Put to Velmor County, 24 Feb 2027. Answered by R. Tamm, Building official, 2 Mar 2027 (Letter BD-27-118): From the ground.')
    expect(told.at(-2)).toBe('May the landing at G3 be raised? Not put to anybody yet.')
    expect(anyRecordSchema.safeParse({ ...JSON.parse(frozen('record-v1.json')), ...more }).success).toBe(false)
  })
})

describe('building a record', () => {
  const changed = (change: Partial<RecordSources>) => () => buildRecord({ ...sample.sources, ...change })
  it('gives one document whatever the order of the entries', () => {
    expect(canonicalJson(buildRecord({ ...sample.sources, entries: [...sample.sources.entries].reverse() }))).toBe(canonicalJson(sample.record))
  })
  it('names every entry of the sealed set by its digest, in order of acceptance', () => {
    expect(sample.record.entries.map(entry => entry.number)).toEqual(sample.sources.entries.map((_, at) => at + 1))
    expect(sample.record.entries.map(entry => entry.digest)).toEqual(sample.sources.entries.map(entry => entry.digest))
  })
  it('holds the texts in its language, and codes that have none', async () => {
    const spanish = (await sampleRecord({ photos: 0, looks: 2, language: 'es' })).record
    expect(spanish.checks[0]!.title).toBe('Puntas de amarre hacia dentro, a mano')
    expect(sample.record.checks[0]!.title).toBe('Tie ends turned in, hand-run')
    expect(spanish.checks.map(check => [check.check, check.verdict])).toEqual(sample.record.checks.map(check => [check.check, check.verdict]))
    expect(spanish.sentence.lead).toBe('12 de 19 elementos están liberados.')
  })
  it('tells the history of a deficiency step by step, with names as they were', () => {
    const b07 = sample.record.deficiencies.find(one => one.tag === 'B07')!
    expect(b07.steps.map(step => [step.kind, step.by, step.person])).toEqual([['reading', 'Dana Okafor', null], ['assignment', 'Priya Lindqvist', 'Luis Barrientos'], ['correction', 'Luis Barrientos', 'Luis Barrientos'], ['reading', 'Dana Okafor', null]])
    expect(b07.assignedTo).toBe('Luis Barrientos')
  })
  it('carries the cautions that its line calls for: water at the pool, none for traffic where there is no driveway', () => {
    expect(sample.record.cautions.map(one => one.caution)).toEqual(['general', 'cutEnds', 'tension', 'pinch', 'water'])
  })
  it('carries only limits that a check of it names, and those that stand back for them', () => {
    expect(Object.keys(sample.record.limits)).toEqual(['clearance', 'gap', 'latch', 'ties'])
    expect(sample.record.limitsSetAside.map(one => [one.limit.id, one.by])).toEqual([['latch-built-in', 'latch']])
  })
  it('keeps a marked gap where words were erased', () => {
    const { entries } = sample.sources
    const danger = entries.find(entry => entry.envelope.kind === 'dangerNow')!
    const record = buildRecord({ ...sample.sources, entries: entries.map(entry => entry === danger ? { ...danger, payload: null } as typeof danger : entry) })
    const step = record.deficiencies.flatMap(one => one.steps).find(one => one.entry === danger.envelope.id)!
    expect(step).toMatchObject({ erased: true, words: null, person: null, photos: [] })
    expect(record.entries.map(entry => entry.digest)).toContain(danger.digest)
  })
  it('refuses what cannot be sealed, saying what to do', () => {
    const { entries, outcome, particulars } = sample.sources
    expect(changed({ entries: [{ ...entries[0]!, number: null }, ...entries.slice(1)] })).toThrow(expect.objectContaining({ code: 'notAccepted' }))
    expect(changed({ entries: entries.filter(entry => entry.envelope.kind !== 'dangerNow') })).toThrow(expect.objectContaining({ code: 'unknownEntry' }))
    expect(changed({ outcome: { ...outcome, waiting: ['01940000-0000-7000-8000-000000000009'] } })).toThrow(expect.objectContaining({ code: 'unknownEntry' }))
    expect(changed({ outcome: { ...outcome, unknown: ['01940000-0000-7000-8000-000000000009'] } })).toThrow(expect.objectContaining({ code: 'unknownEntry' }))
    expect(changed({ names: {} })).toThrow(expect.objectContaining({ code: 'unknownName' }))
    expect(changed({ basis: { ...sample.sources.basis, checks: [] } })).toThrow(expect.objectContaining({ code: 'unknownCheck' }))
    expect(changed({ basisDigest: 'f'.repeat(64) })).toThrow(expect.objectContaining({ code: 'otherBasis' }))
    expect(changed({ particulars: { ...particulars, scope: 'final' } })).toThrow(expect.objectContaining({ code: 'openInFinal' }))
  })
})
