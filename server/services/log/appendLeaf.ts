import { randomBytes } from 'node:crypto'
import { canonicalJson } from '../../../shared/record/canonicalJson'
import { leafHash } from '../../../shared/log/merkleTree'
import * as log from '../../database/queries/log'
import type { Tx } from '../../database/withSession'

/** What a leaf may be about; each is a leaf of its own, none is ever rewritten. */
export type LeafKind = 'record' | 'acceptance' | 'superseded' | 'underQuestion' | 'current' | 'withdrawn'

/** Appends a leaf as the last steps of the caller's transaction and returns its position. The salt keeps others from guessing what it is over. */
export async function appendLeaf(tx: Tx, kind: LeafKind, organisationId: string, recordId: string, content: Record<string, unknown>): Promise<number> {
  const text = canonicalJson({ ...content, kind, salt: randomBytes(16).toString('hex'), version: 1 })
  return log.append(tx, kind, text, Buffer.from(leafHash(Buffer.from(text, 'utf8'))).toString('hex'), organisationId, recordId)
}
