import { acceptanceOf } from '../../database/queries/portal'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { useStorage } from '../../storage/storage'
import { notFound } from '../failure'

export const acceptanceKey = (organisationId: string, digest: string) => `acceptance/${organisationId}/${digest}.pdf`

/** The sealed paper of an acceptance and the name that it is saved under. */
export async function readAcceptanceFile(who: Session, id: string): Promise<{ bytes: Buffer, name: string }> {
  const row = await withSession(who, tx => acceptanceOf(tx, id))
  const bytes = row ? await useStorage().get(acceptanceKey(row.organisationId, row.fileDigest)) : null
  if (!row || !bytes) throw notFound('acceptance')
  return { bytes, name: `${row.recordCode}-${row.meaning}.pdf` }
}
