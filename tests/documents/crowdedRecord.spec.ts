import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { buildRecordPdf } from '#server/documents/recordPdf'
import { recordSchema, type RecordDocument } from '#shared/record/record'
import { run, testFolder } from '../helpers/outsideTools'
import { sampleRecord, type Sample } from '../helpers/sampleRecord'

/** The longest that the schemas let people write, everywhere at once: it may take pages, it may not run off one. */
const LONG = `${'Words that go on and on beside a fence. '.repeat(49)}End.`
const WIDE = 'W'.repeat(120)

const folder = testFolder()
let sample: Sample

function crowded(record: RecordDocument): RecordDocument {
  const reading = record.checks.find(check => check.check === 'gap-below')!.readings[0]!
  return recordSchema.parse({
    ...record,
    organisation: { ...record.organisation, name: WIDE, address: Array(5).fill(WIDE) },
    inspectors: Array(4).fill({ name: WIDE, title: WIDE, employer: WIDE, builtTheFence: true }),
    client: { ...record.client, name: WIDE, contact: { name: WIDE, title: WIDE, phone: '1'.repeat(60) } },
    site: { ...record.site, name: WIDE, address: 'Long Road '.repeat(29).trim() },
    job: { ...record.job, title: 'T'.repeat(200), keys: { contract: WIDE, permit: WIDE, buildingCode: WIDE, gateTag: WIDE } },
    questions: Array(3).fill({ words: LONG, askedOf: WIDE, on: '2027-03-03' }),
    devicesOut: Array(3).fill({ device: WIDE, holder: WIDE, takenAt: record.sealedAt, reason: LONG }),
    checks: record.checks.map(check => ({
      ...check,
      title: check.check === 'gap-below' ? 'A long title of a check '.repeat(20).trim() : check.title,
      readings: check.check === 'gap-below' ? [{ ...check.readings[0]!, note: LONG }, ...Array.from({ length: 120 }, (_, at) => ({ ...reading, place: { face: null, bay: at + 1, from: null, height: null } }))] : check.readings,
      setAside: check.setAside ? { ...check.setAside, words: LONG } : null,
    })),
    deficiencies: record.deficiencies.map(one => ({ ...one, waitsFor: one.waitsFor && WIDE, steps: one.steps.map(step => ({ ...step, words: LONG, by: WIDE })) })),
    notes: record.notes.map(note => ({ ...note, words: LONG })),
    signatures: record.signatures.map(signature => ({ ...signature, signer: { name: WIDE, title: WIDE }, words: LONG, typed: signature.typed && WIDE })),
    provisions: record.provisions.map(provision => ({ ...provision, note: LONG })),
  })
}

beforeAll(async () => {
  sample = await sampleRecord({ photos: 3 })
  folder.put('crowded.pdf', await buildRecordPdf(crowded(sample.record), sample))
})
afterAll(() => folder.remove())

describe('a record in which people wrote as much as they may', () => {
  it('is whole, with no text outside the margins or in the room of head and foot', () => {
    const path = folder.path('crowded.pdf')
    expect(run('qpdf', '--check', path)).toContain('No syntax or stream encoding errors found')
    const boxes = [...run('pdftotext', '-bbox', path, '-').matchAll(/xMin="([\d.]+)" yMin="([\d.]+)" xMax="([\d.]+)" yMax="([\d.]+)">([^<]*)</g)]
    expect(boxes.length).toBeGreaterThan(5000)
    const astray = boxes.filter(([, xMin, yMin, xMax, yMax]) => Number(xMin) < 50 || Number(xMax) > 563 || Number(yMax) > 770 || (Number(yMax) > 56 && Number(yMin) < 66 && Number(yMin) > 48) || (Number(yMin) > 712 && Number(yMax) > 724 && Number(yMin) < 733))
    expect(astray.map(([, xMin, yMin, xMax, yMax, word]) => `${word!.slice(0, 20)} ${xMin} ${yMin} ${xMax} ${yMax}`)).toEqual([])
  })
  it('loses no word of a note', () => {
    const text = run('pdftotext', folder.path('crowded.pdf'), '-')
    expect(text.match(/End\./g)!.length).toBeGreaterThanOrEqual(3 + 3 + sample.record.notes.length + sample.record.signatures.length)
  })
})
