import { z } from 'zod'
import { DEFICIENCY_CLASSES } from '../checklist/check'
import type { KeptEntry, PhotoRef } from '../entry/entry'
import { digestSchema, isKnown, MEANINGS } from '../entry/entry'
import { FACES } from '../line/line'
import { canonicalJson, digestOf, parseCanonicalJson, sha256Hex } from '../record/canonicalJson'
import type { RoundBasis } from './basis'
import type { FoldOptions } from './fold'
import { fold } from './fold'
import type { RoundOutcome } from './outcome'
import { DEFICIENCY_STATES, VERDICTS } from './outcome'
import { readyToSign, SIGN_SCOPES } from './readyToSign'

const uuid = z.string().uuid()
const person = z.object({ account: uuid.nullable(), name: z.string().trim().min(1).max(120), title: z.string().max(120).optional() }).strict()

/** What a signer says beyond the round: for what, in which meaning, under which text, and who they are. */
export const signerStatementSchema = z.object({
  scope: z.enum(SIGN_SCOPES),
  meaning: z.enum(MEANINGS),
  /** The text that was read, whole, with its id and language. */
  consent: z.object({ id: z.string().min(1).max(80), language: z.enum(['en', 'es']), text: z.string().min(1).max(4000) }).strict(),
  signer: person,
  role: z.string().trim().min(1).max(120),
  known: z.enum(['ownAccount', 'ownLink', 'onDevice']),
  /** In whose presence, when signed on another's device. */
  presence: person.nullable(),
}).strict()
export type SignerStatement = z.infer<typeof signerStatementSchema>

/** A sign sheet, version 1, for ever (contracts.md 4). The signature is over the SHA-256 of its RFC 8785 text. */
export const signSheetSchema = signerStatementSchema.extend({
  format: z.literal('smoothside-sign-sheet'),
  version: z.literal(1),
  job: uuid,
  round: uuid,
  rules: z.number().int().min(1),
  /** Digest of the basis in force, which pins all that follows. */
  basis: digestSchema,
  checklists: z.array(z.object({ id: z.string(), version: z.number().int().min(1) }).strict()),
  /** Digest of the limits that held. */
  limits: digestSchema,
  /** The line: its version at the desk, and the digest of the line as built. */
  line: z.object({ version: z.number().int().min(1), digest: digestSchema }).strict(),
  /** Digests of every entry that is no signature, and of every photo that they name, in order. */
  entries: z.array(digestSchema),
  photos: z.array(digestSchema),
  checks: z.array(z.object({ element: uuid, check: z.string(), face: z.enum(FACES).nullable(), verdict: z.enum(VERDICTS), readAgain: z.boolean() }).strict()),
  elements: z.array(z.object({ element: uuid, verdict: z.enum(VERDICTS), released: z.boolean(), outOfUse: z.boolean() }).strict()),
  deficiencies: z.array(z.object({ id: uuid, tag: z.string(), class: z.enum(DEFICIENCY_CLASSES), state: z.enum(DEFICIENCY_STATES) }).strict()),
}).strict()
export type SignSheet = z.infer<typeof signSheetSchema>

/** Why a sheet cannot be made. */
export const SIGN_SHEET_REFUSALS = {
  notReady: 'Something stands against signing this record; look at what is still open, or choose an interim record.',
  noEntries: 'There is nothing to sign yet.',
  presence: 'A signature on another\'s device names the person in whose presence it is given, and only such a one does.',
} as const

/** A sheet that must not be signed, with its stable code. */
export class SignSheetRefused extends Error {
  override readonly name = 'SignSheetRefused'
  constructor(readonly code: keyof typeof SIGN_SHEET_REFUSALS) {
    super(SIGN_SHEET_REFUSALS[code])
  }
}

/**
 * The sheet that a person signs over what this round has come to, and its digest. Signatures are no part of it, so that several people sign the same set.
 *
 * @throws {SignSheetRefused} what a record of that scope does not allow ({@link readyToSign})
 */
export function makeSignSheet(entries: readonly KeptEntry[], outcome: RoundOutcome, basis: RoundBasis, statement: SignerStatement): { text: string, digest: string } {
  const first = entries[0]
  if (!first) throw new SignSheetRefused('noEntries')
  if (!readyToSign(outcome, statement.scope).ready) throw new SignSheetRefused('notReady')
  if ((statement.known === 'onDevice') !== (statement.presence !== null)) throw new SignSheetRefused('presence')
  const text = canonicalJson({ ...signerStatementSchema.parse(statement), ...roundPart(entries, outcome, basis) })
  return { text, digest: sha256Hex(text) }
}

const inOrder = (digests: Iterable<string>) => [...new Set(digests)].sort()

/** All of a sheet that does not depend on who signs. */
function roundPart(entries: readonly KeptEntry[], outcome: RoundOutcome, basis: RoundBasis): Omit<SignSheet, keyof SignerStatement> {
  const signed = entries.filter(entry => entry.envelope.kind !== 'signature')
  return {
    format: 'smoothside-sign-sheet',
    version: 1,
    job: entries[0]!.envelope.job,
    round: entries[0]!.envelope.round,
    rules: outcome.rules,
    basis: outcome.basis,
    checklists: basis.checklists.map(({ id, version }) => ({ id, version })),
    limits: digestOf(basis.limits),
    line: { version: outcome.line.version, digest: digestOf(outcome.line) },
    entries: inOrder(signed.map(entry => entry.digest)),
    photos: inOrder(signed.flatMap(photosOf)),
    checks: outcome.checks.map(({ element, check, face, verdict, readAgain }) => ({ element, check, face, verdict, readAgain })),
    elements: outcome.elements.map(({ element, verdict, released, outOfUse }) => ({ element, verdict, released, outOfUse })),
    deficiencies: outcome.deficiencies.map(({ id, tag, class: weight, state }) => ({ id, tag, class: weight, state })),
  }
}

/** Photos that an entry names, by the digest of their final bytes. */
export function photosOf(entry: KeptEntry): string[] {
  if (!isKnown(entry) || entry.payload === null || !('photos' in entry.payload)) return []
  return (entry.payload.photos as PhotoRef[]).map(photo => photo.digest)
}

/** What a sheet comes to when it is worked out again. */
export interface SignSheetCheck {
  sheet: SignSheet
  digest: string
  /** Digests that were signed over and are not among the entries. */
  missing: string[]
  /** Ids of entries that are not signatures and were not signed over: they came later. */
  late: string[]
  /** Fields that come out otherwise from the same entries; empty where all agrees. Not told while something is missing or erased. */
  differs: string[]
  /** Ids of signed entries whose payload has been erased since: their digests still hold, what they said is not worked out again. */
  erased: string[]
}

/**
 * Works a sheet out again from the entries that it was signed over and compares. Throws {@link CanonicalJsonError} for a text that is not canonical, a ZodError
 * for one that is no sheet, {@link RoundError} where the basis is not given.
 */
export function checkSignSheet(text: string, entries: readonly KeptEntry[], bases: ReadonlyMap<string, RoundBasis>, options: FoldOptions = {}): SignSheetCheck {
  const sheet = signSheetSchema.parse(parseCanonicalJson(text))
  const wanted = new Set(sheet.entries)
  const others = entries.filter(entry => entry.envelope.kind !== 'signature')
  const signed = others.filter(entry => wanted.has(entry.digest))
  const present = new Set(signed.map(entry => entry.digest))
  const missing = sheet.entries.filter(digest => !present.has(digest))
  const erased = signed.filter(entry => isKnown(entry) && entry.payload === null).map(entry => entry.envelope.id)
  const differs: string[] = []
  if (missing.length === 0 && erased.length === 0 && signed.length > 0) {
    const outcome = fold(signed, bases, options)
    const again = roundPart(signed, outcome, bases.get(outcome.basis)!)
    for (const key of Object.keys(again) as (keyof typeof again)[]) if (canonicalJson(again[key]) !== canonicalJson(sheet[key])) differs.push(key)
  }
  return { sheet, digest: sha256Hex(text), missing, late: others.filter(entry => !wanted.has(entry.digest)).map(entry => entry.envelope.id).sort(), differs, erased }
}
