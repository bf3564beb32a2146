import { createPublicKey, verify, X509Certificate } from 'node:crypto'
import { appendFileSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { leafHash } from '#shared/log/merkleTree'
import { openEpoch, readLog } from '../../server/services/log/openEpoch'
import { writeHead } from '../../server/services/log/writeHead'
import { checkKey } from '../../server/services/check/checkRecord'
import { sealRecord } from '../../server/services/record/sealRecord'
import { witnessKey } from '../../server/services/record/signingKey'
import { drawLineOf, makeSealingScene, signAndRequest, walkAll, type SealingScene } from '../helpers/signedRound'

let scene: SealingScene
let record: string
beforeAll(async () => {
  scene = await makeSealingScene()
  await drawLineOf(scene.one)
  await walkAll(scene.one, false)
  record = await signAndRequest(scene.one, 'final')
}, 120_000)
afterAll(() => scene.end())

const heads = () => readFileSync(join(scene.folder, 'log-heads.jsonl'), 'utf8').trim().split('\n').map(line => JSON.parse(line) as { size: number, root: string, epoch: number, text: string, signature: string })

describe('a log that has fallen behind its last outside head', { timeout: 120_000 }, () => {
  it('is told only where it is, and no epoch is opened for nothing', async () => {
    await writeHead()
    expect(await readLog()).toEqual({ size: 0, epoch: 1, behind: null })
    await expect(openEpoch(scene.one.as('administrator'), 'To be tidy.')).rejects.toMatchObject({ code: 'conflict' })
  })

  it('stops sealing until an administrator opens a new epoch with a reason, which a leaf and a signed head say', async () => {
    // What an old backup leaves: the head outside speaks of leaves that are not here.
    const [last] = heads()
    const at = '2026-11-30T10:00:00.000Z'
    appendFileSync(join(scene.folder, 'log-heads.jsonl'), `${JSON.stringify({ ...last, size: 3, root: 'a'.repeat(64), text: JSON.stringify({ at, epoch: 1, root: 'a'.repeat(64), size: 3, version: 1 }) })}\n`)
    await expect(sealRecord(scene.one.id, record)).rejects.toMatchObject({ code: 'unavailable', message: expect.stringContaining('new epoch') as string })
    expect(await readLog()).toEqual({ size: 0, epoch: 1, behind: { size: 3, at } })

    expect(await openEpoch(scene.one.as('administrator'), 'The disk broke; the backup of Sunday was put back.')).toEqual({ size: 1, epoch: 2, behind: null })
    await expect(openEpoch(scene.one.as('administrator'), 'Again.')).rejects.toMatchObject({ code: 'conflict' })
    const { rows: [leaf] } = await scene.admin.query<{ epoch: number, kind: string, text: string, hash: string }>('select epoch, kind, text, hash from log_leaf')
    expect(leaf).toMatchObject({ epoch: 2, kind: 'epoch', hash: Buffer.from(leafHash(Buffer.from(leaf!.text, 'utf8'))).toString('hex') })
    expect(JSON.parse(leaf!.text)).toMatchObject({ epoch: 2, reason: 'The disk broke; the backup of Sunday was put back.', by: scene.one.accounts.administrator, from: 0, leaves: { size: 3, root: 'a'.repeat(64) } })
    const head = heads().at(-1)!
    expect(head).toMatchObject({ size: 1, epoch: 2, root: leaf!.hash })
    const { chain } = await witnessKey()
    expect(verify('sha256', Buffer.from(head.text), createPublicKey(new X509Certificate(Buffer.from(chain[0]!)).publicKey.export({ type: 'spki', format: 'pem' })), Buffer.from(head.signature, 'base64'))).toBe(true)
  })

  it('is sealed into again, and its proofs lead through the new epoch', async () => {
    await sealRecord(scene.one.id, record)
    const { rows: [row] } = await scene.admin.query<{ code: string, sealing: string }>('select code, sealing from record where id = $1', [record])
    expect(row!.sealing).toBe('sealed')
    expect(await checkKey(row!.code)).toMatchObject({ verdict: 'found', log: { verified: true, headSigned: true, position: 1 } })
  })
})
