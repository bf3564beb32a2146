import { createHash } from 'node:crypto'
import { afterAll, describe, expect, it } from 'vitest'
import { buildAcceptancePdf } from '#server/documents/acceptancePdf'
import { makeOrganisationCertificate } from '#server/documents/certificate'
import { checkPdf } from '#server/documents/checkPdf'
import { signPdf } from '#server/documents/signPdf'
import { recordTexts } from '#shared/record/wording'
import { acceptanceSchema, type AcceptanceDocument } from '#shared/record/acceptance'
import { canonicalJson } from '#shared/record/canonicalJson'
import { run, testFolder } from '../helpers/outsideTools'

const folder = testFolder()
afterAll(() => folder.remove())

const sheet = canonicalJson({ meaning: 'acceptsDeviation' })
const acceptance = (language: 'en' | 'es'): AcceptanceDocument => acceptanceSchema.parse({
  format: 'smoothside-acceptance', version: 1, renderer: 1, id: '01940000-0000-7000-8000-000000000001', code: 'LS-0417-2-A1', language, zones: { '-05:00': 'EST' },
  checkAddress: 'https://smoothside.example/check/LS-0417-2-A1', witness: 'Smoothside at smoothside.example',
  record: { id: '01940000-0000-7000-8000-000000000002', code: 'LS-0417-2', number: 2, document: 'a'.repeat(64), range: 'b'.repeat(64), sealedAt: '2027-03-03T15:12:00-05:00' },
  organisation: 'Tarnbeck Fence & Gate', client: 'Wrenfold School District', site: 'Wrenfold Elementary', job: 'LS-0417',
  meaning: 'acceptsDeviation', meaningText: recordTexts(language).meanings.acceptsDeviation, signer: { name: 'Ruth Adeyemi', title: 'facilities clerk' }, role: 'client contact', known: 'ownLink', presence: null,
  at: '2027-03-05T09:02:00-05:00', sheet, sheetDigest: createHash('sha256').update(sheet).digest('hex'),
  strokes: [[{ x: 10, y: 50, t: 0 }, { x: 30, y: 20, t: 20 }, { x: 44, y: 70, t: 40 }, { x: 80, y: 30, t: 60 }, { x: 120, y: 55, t: 80 }]], typed: null, words: null,
  deviations: [{ deficiency: '01940000-0000-7000-8000-000000000003', tag: 'B16', element: 'R9', title: 'Slat color', words: 'Slats are dark green instead of black.', accepted: true, condition: 'black slats at the next repair', until: '2028-03-01' }],
})

describe.each(['en', 'es'] as const)('an acceptance in %s', (language) => {
  it('is sealed by the witness, bound to its record, and says what it is and what it is not', async () => {
    const witness = await makeOrganisationCertificate({ organisation: 'Smoothside at smoothside.example', from: new Date('2026-01-01T00:00:00Z') })
    const document = acceptance(language)
    const { file } = signPdf(await buildAcceptancePdf(document), witness.seal.key, [witness.seal.certificate, witness.root.certificate])
    expect(await checkPdf(file, [witness.root.certificate])).toMatchObject({ verdict: 'genuine', findings: [], document: { kind: 'acceptance', acceptance: document } })
    const path = folder.put(`acceptance-${language}.pdf`, file)
    expect(run('qpdf', '--check', path)).toContain('No syntax or stream encoding errors found')
    const text = run('pdftotext', path, '-').replace(/\s+/g, ' ')
    for (const words of [acceptance(language).meaningText, 'aaaa aaaa', 'bbbb bbbb', 'Slats are dark green', 'LS-0417-2', ...(language === 'en' ? ['It changes nothing in the record.', '5 Mar 2027, 09:02 EST', 'until 1 Mar 2028'] : ['No cambia nada en el acta.', '5 mar 2027, 09:02 EST', 'hasta 1 mar 2028'])]) expect(text).toContain(words)
    expect(run('pdfinfo', path)).toMatch(/Pages:\s+1\n/)
  })
})
