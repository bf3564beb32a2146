import { writeFileSync } from 'node:fs'
import { it } from 'vitest'
import { buildRecordPdf } from '#server/documents/recordPdf'
import { sampleRecord } from '../helpers/sampleRecord'
it('x', async () => { for (const [name, o] of Object.entries({ en: {}, es: { language: 'es', system: 'metric' } as const, final: { final: true } })) { const { record, photoBytes } = await sampleRecord(o)
const t = performance.now(); const pdf = await buildRecordPdf(record, { photoBytes }); console.log(name, pdf.length, performance.now() - t); writeFileSync(`/tmp/rec/${name}.pdf`, pdf) } })
