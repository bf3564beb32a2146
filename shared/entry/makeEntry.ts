import { RULES_VERSION } from '../round/basis'
import { canonicalJson, sha256Hex } from '../record/canonicalJson'
import type { Entry, EntryKind, Envelope, PayloadOf, Place, WireEntry } from './entry'
import { entryRefusal, EntryRefused } from './entryRefused'
import { readEntry } from './readEntry'

/** What a person wrote, with the id, salt and instant that the device gave it. What is left out does not apply. */
export interface EntryDraft<K extends EntryKind> {
  kind: K
  /** A UUIDv7 made on the device. */
  id: string
  /** 128 random bits in hex. */
  salt: string
  /** Device clock with offset, ISO 8601. */
  madeAt: string
  organisation: string
  job: string
  round: string
  author: string
  device: string
  walk?: string | null
  element?: string | null
  check?: string | null
  basis?: string | null
  place?: Place | null
  answers?: string[]
  replaces?: string[]
  payload: Omit<PayloadOf<K>, 'salt'>
}

/**
 * Makes an entry: its two canonical texts and the same entry as a reader has it. `answers` and `replaces` are sets and are written in order.
 * Words lose white space at their ends. Throws {@link EntryRefused} with a pointer for whatever {@link readEntry} would refuse.
 */
export function makeEntry<K extends EntryKind>(draft: EntryDraft<K>): { wire: WireEntry, entry: Entry<K> } {
  const payload = canonicalJson(withoutGaps({ ...trimmed(draft.payload), salt: draft.salt }))
  const envelope: Envelope = {
    id: draft.id,
    organisation: draft.organisation,
    job: draft.job,
    round: draft.round,
    walk: draft.walk ?? null,
    kind: draft.kind,
    version: 1,
    author: draft.author,
    device: draft.device,
    madeAt: draft.madeAt,
    element: draft.element ?? null,
    check: draft.check ?? null,
    basis: draft.basis ?? null,
    place: draft.place ?? null,
    answers: inOrder(draft.answers),
    replaces: inOrder(draft.replaces),
    payload: sha256Hex(payload),
    rules: RULES_VERSION,
  }
  const wire = { envelope: canonicalJson(envelope), payload }
  const read = readEntry(wire)
  if (read.state === 'refused') throw new EntryRefused(read.refusal)
  if (read.state === 'unknown') throw new EntryRefused(entryRefusal('envelope', '/envelope/kind'))
  return { wire, entry: read.entry as Entry<K> }
}

const inOrder = (ids: readonly string[] = []) => [...new Set(ids)].sort()

/** Fields that a form left undefined are absent, as JSON has it. */
const withoutGaps = (value: object): unknown => JSON.parse(JSON.stringify(value))

/** The fields that the schemas call words; what a person typed as a figure stays as typed. */
const WORDS = new Set(['words', 'reason', 'why', 'name', 'for', 'waitsFor', 'document', 'condition', 'role'])
function trimmed<T>(value: T): T {
  if (Array.isArray(value)) return value.map(trimmed) as T
  if (typeof value !== 'object' || value === null) return value
  return Object.fromEntries(Object.entries(value).map(([key, inner]) => [key, WORDS.has(key) && typeof inner === 'string' ? inner.trim() : trimmed(inner)])) as T
}
