import { createPrivateKey, sign } from 'node:crypto'
import { appendFile, readFile } from 'node:fs/promises'
import { canonicalJson } from '../../../shared/record/canonicalJson'
import { rootOf } from '../../../shared/log/merkleTree'
import { entrance } from '../../database/entrance'
import { useSettings } from '../../settings'
import { Failure } from '../failure'
import { witnessKey } from '../record/signingKey'

/** A head as it stands outside the database, one a line. */
interface OutsideHead { size: number, root: string, epoch: number, text: string, signature: string }

const outside = () => `${useSettings().dataFolder}/log-heads.jsonl`

/** Signs the log's head of now, keeps it in the database and outside it. */
export async function writeHead(): Promise<{ size: number, root: string }> {
  const size = await entrance.logSize()
  const root = Buffer.from(rootOf((await entrance.logHashes(0, size)).map(hash => Buffer.from(hash, 'hex')))).toString('hex')
  const { log_epoch: epoch } = await entrance.installation()
  const text = canonicalJson({ epoch, root, size, at: new Date().toISOString(), version: 1 })
  const { key } = await witnessKey()
  const signature = sign('sha256', Buffer.from(text, 'utf8'), createPrivateKey({ key: Buffer.from(key), format: 'der', type: 'pkcs8' })).toString('base64')
  await entrance.writeLogHead(size, root, text, signature)
  await appendFile(outside(), `${JSON.stringify({ size, root, epoch, text, signature } satisfies OutsideHead)}\n`)
  return { size, root }
}

/** The last head that stands outside, where the database has fallen behind it in the same epoch (an old backup was put back); null where it has not. */
export async function headAhead(): Promise<OutsideHead | null> {
  const text = await readFile(outside(), 'utf8').catch((error: NodeJS.ErrnoException) => { if (error.code === 'ENOENT') return ''; throw error })
  const last = text.trim().split('\n').filter(Boolean).at(-1)
  if (!last) return null
  const head = JSON.parse(last) as OutsideHead
  const { log_epoch: epoch } = await entrance.installation()
  return head.epoch === epoch && await entrance.logSize() < head.size ? head : null
}

/** Refuses to seal over a log that has fallen behind: sealing again at the same positions would make two histories. An administrator opens a new epoch first. */
export async function refuseBehind(): Promise<void> {
  if (await headAhead()) throw new Failure('unavailable', 'The log of this installation is older than its last signed head: a backup was put back. Sealing stops until an administrator opens a new epoch of the log.')
}
