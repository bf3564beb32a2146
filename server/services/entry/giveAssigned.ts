import type { Entry, KeptEntry } from '../../../shared/entry/entry'
import { isKnown } from '../../../shared/entry/entry'
import { giveJob } from '../../database/queries/deficiency'
import type { Session, Tx } from '../../database/withSession'
import { asProgram } from '../../database/withSession'

/** Whoever of the crew is given a tag is given its job too, or they would not see it: at the desk, in the field, and where a push of the crew lets in what waited for it. */
export async function giveAssigned(tx: Tx, who: Session, jobId: string, accepted: KeptEntry[]): Promise<void> {
  const accounts = accepted.flatMap(entry => isKnown(entry) && entry.envelope.kind === 'assignment' ? (entry as Entry<'assignment'>).payload?.to.account ?? [] : [])
  if (accounts.length > 0) await asProgram(tx, who, () => giveJob(tx, jobId, accounts))
}
