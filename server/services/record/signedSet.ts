import type { AnyEntry, Entry, KeptEntry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import type { RoundBasis } from '../../../shared/round/basis'
import type { FoldOptions } from '../../../shared/round/fold'
import { fold } from '../../../shared/round/fold'
import type { Adverse } from '../../../shared/round/lateEffect'
import { lateEffect } from '../../../shared/round/lateEffect'
import type { RoundOutcome } from '../../../shared/round/outcome'
import { checkSignSheet } from '../../../shared/round/signSheet'
import { readSheet } from '../entry/signatureRefusal'

export interface SignedSet {
  scope: 'interim' | 'final'
  /** The entries that were signed over, and every signature (also absent, refused, to follow). */
  entries: AnyEntry[]
  outcome: RoundOutcome
  /** Entries that came after and change nothing. */
  late: KeptEntry[]
  /** What later entries change for the worse: nothing is sealed over it. */
  adverse: Adverse[]
  /** Signers whose sheet misses entries, was worked out differently or cannot be read: they sign again. */
  again: string[]
}

const isSigned = (entry: KeptEntry): entry is Entry<'signature'> => isKnown(entry) && entry.envelope.kind === 'signature' && (entry as Entry<'signature'>).payload?.state === 'signed'

/**
 * The set that a record seals: exactly what the newest signature was given over (contracts.md 4). Earlier signatures stand where what came between was
 * harmless to them. Null when nobody has signed.
 */
export function signedSet(entries: KeptEntry[], bases: ReadonlyMap<string, RoundBasis>, options: FoldOptions): SignedSet | null {
  const replaced = new Set(entries.flatMap(entry => entry.envelope.replaces))
  const signatures = entries.filter(entry => entry.envelope.kind === 'signature' && !replaced.has(entry.envelope.id))
  const given = signatures.filter(isSigned)
  const signed = given.filter(one => readSheet(one.payload!.sheet) !== null)
  const newest = signed.at(-1)
  if (!newest) return null
  const check = checkSignSheet(newest.payload!.sheet!, entries, bases, options)
  const inSet = new Set(check.sheet.entries)
  const set = entries.filter(entry => inSet.has(entry.digest))
  const outcome = fold(set, bases, options)
  const late = entries.filter(entry => entry.envelope.kind !== 'signature' && !inSet.has(entry.digest))
  const again = signed.filter((one) => {
    const own = one === newest ? check : checkSignSheet(one.payload!.sheet!, set, bases, options)
    if (own.missing.length > 0 || own.differs.length > 0 || own.digest !== one.payload!.sheetDigest || own.sheet.scope !== check.sheet.scope) return true
    return own.late.length > 0 && lateEffect(fold(set.filter(entry => own.sheet.entries.includes(entry.digest)), bases, options), outcome).length > 0
  })
  return {
    scope: check.sheet.scope,
    entries: [...set, ...signatures].filter(isKnown),
    outcome, late,
    adverse: late.length > 0 ? lateEffect(outcome, fold(entries, bases, options)) : [],
    again: [...again, ...given.filter(one => !signed.includes(one))].map(one => one.payload!.signer.name),
  }
}
