import { createHash, X509Certificate } from 'node:crypto'
import type { CheckAnswer } from '../../../shared/api/check'
import { CHECK_MOST } from '../../../shared/api/check'
import { entrance, type PublicRecordRow } from '../../database/entrance'
import { checkPdf } from '../../documents/checkPdf'
import { Failure } from '../failure'
import { logProof } from './logProof'

const NOTHING: Omit<CheckAnswer, 'by' | 'verdict'> = { findings: [], record: null, acceptance: null, log: null, root: null }
const DIGEST = /^[0-9a-f]{64}$/

function shown(row: PublicRecordRow): CheckAnswer['record'] {
  return {
    code: row.code, number: row.number, scope: row.scope, organisation: row.organisation_name, sealedAt: row.sealed_at.toISOString(), standing: row.standing, standingAt: row.standing_at?.toISOString() ?? null,
    elements: row.elements, replaced: row.replaced ?? [], document: row.document_digest, range: row.range_digest, file: row.file_digest,
  }
}

/** The second certificate of the witness's chain is its root. */
async function witnessRoot(): Promise<string | null> {
  return (await entrance.installation()).witness_certificate?.split(/(?<=-----END CERTIFICATE-----\n)/)[1] ?? null
}

/** What is known of a digest or a code, without looking into any file. Only a file's own digest says that the file is genuine. */
export async function checkKey(key: string): Promise<CheckAnswer> {
  const digest = DIGEST.test(key.toLowerCase())
  const by = digest ? 'digest' as const : 'code' as const
  // An acceptance carries the code of its record and a number of its own.
  const [row] = await entrance.recordOf(digest ? key : key.toUpperCase().replace(/-A\d{1,4}$/, ''))
  if (row) return { ...NOTHING, by, verdict: row.file_digest === key.toLowerCase() ? 'genuine' : 'found', record: shown(row), log: await logProof(Number(row.leaf), digest), root: row.root_certificate }
  const acceptance = digest ? await entrance.acceptanceOf(key) : undefined
  if (!acceptance) return { ...NOTHING, by, verdict: 'unknown' }
  return acceptanceAnswer(by, acceptance)
}

async function acceptanceAnswer(by: CheckAnswer['by'], acceptance: { record_code: string, meaning: string, created_at: Date, leaf: string }): Promise<CheckAnswer> {
  const [about] = await entrance.recordOf(acceptance.record_code)
  return { ...NOTHING, by, verdict: 'genuine', record: about ? shown(about) : null, acceptance: { meaning: acceptance.meaning, at: acceptance.created_at.toISOString() }, log: await logProof(Number(acceptance.leaf), true), root: await witnessRoot() }
}

/** Looks into a file that somebody brings, and tells a changed one from one that is not from here. Nothing of it is kept. */
export async function checkFile(bytes: Buffer): Promise<CheckAnswer> {
  if (bytes.length > CHECK_MOST) throw new Failure('tooLarge', 'The check takes files of 40 MB at most. Records from here are smaller.')
  const fileDigest = createHash('sha256').update(bytes).digest('hex')
  const known = await checkKey(fileDigest)
  if (known.verdict === 'genuine') return { ...known, by: 'file' }
  const witness = await witnessRoot()
  const roots = [...await entrance.signingRoots(), ...(witness ? [witness] : [])]
  const { verdict, findings, rangeDigest, root } = await checkPdf(bytes, roots.map(one => new Uint8Array(new X509Certificate(one).raw)))
  if (verdict !== 'genuine') return { ...NOTHING, by: 'file', verdict, findings }
  // Sealed here and whole, yet not the very bytes that were kept: a time stamp may have been added in the room that is left for it.
  const [row] = await entrance.recordOf(rangeDigest!)
  return { ...NOTHING, by: 'file', verdict: 'genuine', findings, record: row ? shown(row) : null, log: row ? await logProof(Number(row.leaf), true) : null, root: root === null ? null : roots[root]! }
}
