import { uuidv7 } from 'uuidv7'
import type { Line } from '../../../shared/line/line'
import { elementsOf } from '../../../shared/line/line'
import { canonicalJson, sha256Hex } from '../../../shared/record/canonicalJson'
import { ChecklistsDiffer, makeBasis } from '../../../shared/round/makeBasis'
import * as entries from '../../database/queries/entry'
import * as lines from '../../database/queries/line'
import { readJobRow } from '../../database/queries/job'
import { provisionsInForce } from '../../database/queries/provision'
import { newestRound } from '../../database/queries/round'
import type { Session, Tx } from '../../database/withSession'
import { forOrganisation, withSession } from '../../database/withSession'
import { readBuiltIn } from '../checklist/readBuiltIn'
import { writeDeskEntry } from '../entry/writeDeskEntry'
import { Failure, notFound } from '../failure'
import { stripOf } from './jobSummary'

type Who = Session & { accountId: string, organisationId: string }

/**
 * Saves a new version of a job's line and pins what the walk is held against. `from` is the version that it was drawn over: another one meanwhile is 409.
 * The first line opens the first round; later ones arrive in the open round as a visible change of basis.
 */
export async function saveLine(who: Who, jobId: string, from: number, drawn: Line, why: string): Promise<{ version: number, basis: string }> {
  const done = await withSession(who, async (tx) => {
    const job = await readJobRow(tx, jobId)
    if (!job) throw notFound('job')
    const newest = await lines.newestLine(tx, jobId)
    if ((newest?.version ?? 0) !== from) throw new Failure('stale', 'Somebody else changed this line meanwhile. Load it again; yours is still on the screen to copy from.')
    const line: Line = { ...drawn, version: from + 1, system: job.system }
    await lines.keepElements(tx, job.siteId, elementsOf(line))
    await lines.insertLine(tx, jobId, line.version, canonicalJson(line), who.accountId)
    const pinned = await pinBasis(tx, who, job, line)
    if (!pinned.round) await lines.writeStrip(tx, jobId, stripOf(line, null))
    return { version: line.version, ...pinned }
  })
  await announce(who, jobId, done, why)
  return { version: done.version, basis: done.basis }
}

/** Pins the job's basis anew over the line that it has, after checklists or local numbers changed. Nothing changed: nothing is written. */
export async function renewBasis(who: Who, jobId: string, why: string): Promise<{ basis: string } | null> {
  const done = await withSession(who, async (tx) => {
    const job = await readJobRow(tx, jobId)
    if (!job) throw notFound('job')
    const newest = await lines.newestLine(tx, jobId)
    return newest ? pinBasis(tx, who, job, JSON.parse(newest.line) as Line) : null
  })
  if (!done) return null
  await announce(who, jobId, done, why)
  return { basis: done.basis }
}

interface Pinned { basis: string, round: { id: string, basis: string } | null }

async function pinBasis(tx: Tx, who: Who, job: NonNullable<Awaited<ReturnType<typeof readJobRow>>>, line: Line): Promise<Pinned> {
  const provisions = await provisionsInForce(tx, job)
  let text: string
  try { text = canonicalJson(makeBasis(line, readBuiltIn().filter(list => job.checklists.includes(list.id)), provisions)) }
  catch (error) {
    if (error instanceof ChecklistsDiffer) throw new Failure('conflict', error.message)
    throw error
  }
  const digest = sha256Hex(text)
  await lines.insertBasis(tx, job.id, digest, text, who.accountId)
  const round = await newestRound(tx, job.id)
  if (!round) await lines.insertRound(tx, { id: uuidv7(), jobId: job.id, number: 1, basis: digest, openedBy: who.accountId })
  return { basis: digest, round: round && round.state === 'open' ? round : null }
}

/** In an open round a change at the desk is an entry that everybody sees. */
async function announce(who: Who, jobId: string, { basis, round }: Pinned, why: string): Promise<void> {
  if (!round || round.basis === basis) return
  const replaces = await withSession(who, async (tx) => {
    await lines.setRoundBasis(tx, round.id, basis)
    return entries.standingOfKind(tx, round.id, 'basisChanged')
  })
  // The newest word on the basis: two that do not know of one another would be a conflict that nobody can sign over.
  // Whoever may draw the line may say so; the program writes it down, since of the field's people only the office may change a basis.
  await writeDeskEntry({ ...forOrganisation(who.organisationId), organisationId: who.organisationId }, who.accountId, { kind: 'basisChanged', job: jobId, round: round.id, basis, replaces, payload: { basis, why } })
}
