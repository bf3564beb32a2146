import { uuidv7 } from 'uuidv7'
import { writeAudit } from '../../database/queries/people'
import { recordRow, setStanding } from '../../database/queries/record'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { Failure, notFound } from '../failure'
import { appendLeaf } from '../log/appendLeaf'
import { writeHead } from '../log/writeHead'

/** Says what a sealed record is worth from now on: a leaf of its own, the record is never rewritten. A withdrawn one stays withdrawn. */
export async function changeStanding(who: Session & { accountId: string, organisationId: string }, recordId: string, standing: 'current' | 'underQuestion' | 'withdrawn', reason: string): Promise<void> {
  await withSession(who, async (tx) => {
    const row = await recordRow(tx, recordId)
    if (!row) throw notFound('record')
    if (!await setStanding(tx, recordId, standing, reason)) throw new Failure('conflict', 'Only a sealed record that was not withdrawn can be put under question or withdrawn.')
    await writeAudit(tx, uuidv7(), who.accountId, standing, recordId)
    await appendLeaf(tx, standing, who.organisationId, recordId, { record: recordId, code: row.code, reason })
  })
  await writeHead()
}
