import { afterAll, describe, expect, it } from 'vitest'
import { buildQuestionSheetPdf } from '#server/documents/questionSheetPdf'
import type { Limit } from '#shared/limit/limit'
import { INCH } from '#shared/measure/length'
import { questionSheetSchema, type QuestionSheet } from '#shared/question/question'
import { canonicalJson } from '#shared/record/canonicalJson'
import { run, testFolder } from '../helpers/outsideTools'

const folder = testFolder()
afterAll(() => folder.remove())

const limit = (datum: string, side: 'low' | 'high', name: string, read: string): Limit => ({
  id: `${side}.${datum}`, measurand: 'latch-release-height', datum, unit: 'length', low: null, high: null, avoid: null, [side]: { imperial: 54 * INCH, inclusive: true }, basis: { kind: 'builtIn', name, citation: '404.2.7', read },
})
const asked = (language: 'en' | 'es', more = 0): QuestionSheet => questionSheetSchema.parse({
  format: 'smoothside-questions', version: 1, id: '01940000-0000-7000-8000-000000000001', language, system: 'imperial', at: '2027-02-24T09:10:00-05:00', zones: { '-05:00': 'EST' },
  organisation: 'Tarnbeck Fence & Gate', from: { name: 'Margit Hale', email: 'margit@tarnbeck.example' }, to: 'Velmor County, building division', job: { code: 'TFG-0417', title: 'Pool yard', permit: 'HC-27-0093' },
  site: { name: 'Wrenfold Elementary', address: '40 Mill Road, Marl' }, client: 'Wrenfold School District', message: 'The gates are hung on Friday.',
  questions: [
    {
      id: '01940000-0000-7000-8000-000000000002', words: 'Which of the two holds at this gate, and from where is it taken?',
      about: { title: { en: 'Latch release above the ground', es: 'Pestillo sobre el suelo' }, tags: ['G3'], measurand: 'latch-release-height', unit: 'length', datum: 'ground', setting: 'pool', gap: { upper: 'bottom-of-leaf', lower: 'ground', at: 2 * INCH }, limits: [limit('bottom-of-leaf', 'low', 'Barrier text', 'read in a summary'), limit('ground', 'high', 'Access text', 'read in a copy')] },
    },
    ...Array.from({ length: 1 + more }, (_, at) => ({
      id: `01940000-0000-7000-8000-${String(100 + at).padStart(12, '0')}`, words: 'What gap holds when a child pushes the fabric?',
      about: { title: { en: 'Gap when pushed and lifted', es: 'Hueco al empujar y levantar' }, tags: ['R1', 'R2'], measurand: 'gap-below-pushed', unit: 'length' as const, datum: 'ground', setting: 'school' as const, gap: null, limits: [] },
    })),
  ],
})

describe.each(['en', 'es'] as const)('a sheet of questions in %s', (language) => {
  it('prints each question with its sources, says who asks and who decides, and carries itself as data', async () => {
    const sheet = asked(language)
    const bytes = await buildQuestionSheetPdf(sheet)
    expect(Buffer.from(await buildQuestionSheetPdf(sheet)).equals(Buffer.from(bytes))).toBe(true)
    const path = folder.put(`questions-${language}.pdf`, bytes)
    expect(run('qpdf', '--check', path)).toContain('No syntax or stream encoding errors found')
    const text = run('pdftotext', path, '-').replace(/\s+/g, ' ')
    for (const words of ['TFG-0417', 'HC-27-0093', 'margit@tarnbeck.example', 'Velmor County, building division', 'G3', 'R1, R2', 'Which of the two holds at this gate', 'Barrier text, 404.2.7', language === 'en' ? 'read in a summary' : 'leído en un resumen', 'The gates are hung on Friday.',
      ...(language === 'en' ? ['over the bottom of the leaf', 'Name and role', 'No text that was found sets a number here', 'Local code and the authority having jurisdiction come first', '24 Feb 2027, 09:10 EST'] : ['Pestillo sobre el suelo', 'Nombre y cargo', 'autoridad competente', '24 feb 2027'])]) expect(text).toContain(words)
    expect(run('pdfdetach', '-list', path)).toContain('questions.json')
    run('pdfdetach', '-save', '1', '-o', folder.path('questions.json'), path)
    expect(run('cat', folder.path('questions.json'))).toBe(canonicalJson(sheet))
  })
  it('keeps sixty questions within the margins, over as many pages as they need', async () => {
    const path = folder.put(`many-${language}.pdf`, await buildQuestionSheetPdf(asked(language, 57)))
    expect(Number(/Pages:\s+(\d+)/.exec(run('pdfinfo', path))![1])).toBeGreaterThan(8)
    // No word below the running foot's rule (733 pt) but the foot itself, which stands at 737 and 749.
    const lowest = [...run('pdftotext', '-bbox', path, '-').matchAll(/yMax="([\d.]+)">([^<]*)</g)].filter(found => Number(found[1]) > 725 && Number(found[1]) < 737)
    expect(lowest.map(found => found[2])).toEqual([])
  })
})
