import { z } from 'zod'
import type { RecordRow } from './record'

/** Largest file that the check takes in, in bytes. */
export const CHECK_MOST = 40_000_000

/** What is asked with: the code on the paper, or a SHA-256 of the file (or of its record.json). */
export const checkParamsSchema = z.object({ key: z.string().trim().regex(/^[A-Za-z0-9][A-Za-z0-9-]{2,63}$/) }).strict()

/**
 * What a check comes to. `genuine`: every byte is what was sealed here; `found`: asked by code alone, no file was looked at; `unknown`: nothing like that is
 * known here, which may be a changed file as well as a foreign one; the other three are told only by looking into the file.
 */
export const CHECK_VERDICTS = ['genuine', 'found', 'unknown', 'altered', 'notFromHere', 'notPdf'] as const
export type CheckVerdict = (typeof CHECK_VERDICTS)[number]

/** Where it stands in the log, with all that is needed to work the proof out again (RFC 9162). */
export interface LogProof {
  position: number
  /** The signed head that the proof leads to. */
  size: number
  root: string
  headAt: string
  /** Whether the witness's signature over that head is good. */
  headSigned: boolean
  leaf: string
  /** The text that the leaf is the hash of; only for whoever holds the file. */
  leafText: string | null
  proof: string[]
  verified: boolean
}

/** Answer of GET /api/check/:key and POST /api/check. */
export interface CheckAnswer {
  by: 'code' | 'digest' | 'file'
  verdict: CheckVerdict
  /** Why, by the codes of the verifier; only where the file was looked into. */
  findings: string[]
  record: {
    code: string, number: number, scope: RecordRow['scope'], organisation: string, sealedAt: string, standing: RecordRow['standing'], standingAt: string | null
    elements: number, replaced: { tag: string, by: string, at: string }[], document: string, range: string, file: string
  } | null
  /** Set where the file is a client's acceptance; `record` is then the one that it is about. */
  acceptance: { meaning: string, at: string } | null
  log: LogProof | null
  /** The root certificate (PEM) that the seal goes back to. */
  root: string | null
}
