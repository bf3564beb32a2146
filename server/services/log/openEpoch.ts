import { randomBytes } from 'node:crypto'
import { uuidv7 } from 'uuidv7'
import type { LogStanding } from '../../../shared/api/log'
import { leafHash } from '../../../shared/log/merkleTree'
import { canonicalJson } from '../../../shared/record/canonicalJson'
import { entrance } from '../../database/entrance'
import * as log from '../../database/queries/log'
import { writeAudit } from '../../database/queries/people'
import type { Session } from '../../database/withSession'
import { withSession } from '../../database/withSession'
import { Failure } from '../failure'
import { headAhead, writeHead } from './writeHead'

export async function readLog(): Promise<LogStanding> {
  const [{ log_epoch: epoch }, size, ahead] = [await entrance.installation(), await entrance.logSize(), await headAhead()]
  return { size, epoch, behind: ahead && { size: ahead.size, at: (JSON.parse(ahead.text) as { at: string }).at } }
}

/**
 * Goes on with a log that has fallen behind its last outside head: a new epoch, whose first leaf says why, from where to where, and which head it leaves
 * behind; and a head of the new epoch, signed and written outside. Refused where nothing is behind, since an epoch is opened for that alone.
 */
export async function openEpoch(who: Session & { accountId: string }, reason: string): Promise<LogStanding> {
  const ahead = await headAhead()
  if (!ahead) throw new Failure('conflict', 'The log is not behind its last signed head: there is nothing to open a new epoch for.')
  const content = { kind: 'epoch', version: 1, epoch: ahead.epoch + 1, reason, by: who.accountId, at: new Date().toISOString(), from: await entrance.logSize(), leaves: { size: ahead.size, root: ahead.root }, salt: randomBytes(16).toString('hex') }
  const text = canonicalJson(content)
  await withSession(who, async (tx) => {
    await writeAudit(tx, uuidv7(), who.accountId, 'logEpoch', String(content.epoch))
    if (!await log.openEpoch(tx, ahead.epoch, text, Buffer.from(leafHash(Buffer.from(text, 'utf8'))).toString('hex'))) throw new Failure('stale', 'Somebody else has opened a new epoch meanwhile. Load the page again.')
  })
  await writeHead()
  return readLog()
}
