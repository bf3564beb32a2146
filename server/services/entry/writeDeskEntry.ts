import { randomBytes } from 'node:crypto'
import { uuidv7 } from 'uuidv7'
import type { EntryKind } from '../../../shared/entry/entry'
import { EntryRefused } from '../../../shared/entry/entryRefused'
import type { EntryDraft } from '../../../shared/entry/makeEntry'
import { makeEntry } from '../../../shared/entry/makeEntry'
import type { Session } from '../../database/withSession'
import { Failure } from '../failure'
import { acceptEntries } from './acceptEntries'

type DeskDraft<K extends EntryKind> = Pick<EntryDraft<K>, 'kind' | 'job' | 'round' | 'element' | 'check' | 'basis' | 'place' | 'answers' | 'replaces' | 'payload'> & { id?: string }

/** Writes down what somebody did at the desk or on a client's page, as an entry like any other. The desk's device is the person's own account. */
export async function writeDeskEntry<K extends EntryKind>(who: Session & { organisationId: string }, author: string, draft: DeskDraft<K>): Promise<string> {
  let made: ReturnType<typeof makeEntry<K>>
  try {
    made = makeEntry({ id: draft.id ?? uuidv7(), salt: randomBytes(16).toString('hex'), madeAt: new Date().toISOString().replace('Z', '+00:00'), organisation: who.organisationId, author, device: author, ...draft })
  }
  catch (error) {
    if (error instanceof EntryRefused) throw new Failure('invalid', error.message, [{ pointer: error.pointer, code: error.code, detail: error.message }])
    throw error
  }
  const { results } = await acceptEntries(who, draft.round, [made.wire])
  const [result] = results
  if (result?.state === 'accepted' || result?.state === 'resent') return made.entry.envelope.id
  throw new Failure(result?.state === 'quarantined' ? 'differs' : 'stale', result?.refusal?.message ?? 'What this answers has changed meanwhile. Load the page again and look.', result?.refusal ? [{ pointer: result.refusal.pointer, code: result.refusal.code, detail: result.refusal.message }] : [])
}
