import { randomUUID } from 'node:crypto'
import type pg from 'pg'
import type { AnyEntry, EntryKind, PayloadOf, WireEntry } from '#shared/entry/entry'
import type { Role } from '#shared/permission/permission'
import { canonicalJson } from '#shared/record/canonicalJson'
import type { RoundBasis } from '#shared/round/basis'
import type { Session } from '../../server/database/withSession'
import { forOrganisation } from '../../server/database/withSession'
import { basisOf, ORGANISATION, PEOPLE, RoundStory } from './roundStory'

/** The entry's two texts, as its device made them. */
export const wireOf = (entry: AnyEntry): WireEntry => ({ envelope: canonicalJson(entry.envelope), payload: canonicalJson(entry.payload) })

/** A story whose entries belong to a round of the database. */
export class StoryAt extends RoundStory {
  constructor(readonly job: string, readonly round: string, group: number, basis?: RoundBasis) { super(basis, group) }

  override write<K extends EntryKind>(kind: K, payload: Omit<PayloadOf<K>, 'salt'>, about: Parameters<RoundStory['write']>[2] = {}): string {
    return super.write(kind, payload, { job: this.job, round: this.round, ...about } as typeof about)
  }

  wires(from = 0): WireEntry[] {
    return this.entries.slice(from).map(wireOf)
  }
}

const ROLE_OF: Record<string, Role> = { [PEOPLE.ana]: 'inspector', [PEOPLE.bo]: 'inspector', [PEOPLE.crew]: 'crew', [PEOPLE.manager]: 'manager' }
/** The session in which the author of a story sends; what a client signs is sent by the program. */
export function senderOf(author: string): Session {
  const role = ROLE_OF[author]
  return role ? { accountId: author, standing: role === 'crew' ? 'crew' : 'staff', organisationId: ORGANISATION, role } : forOrganisation(ORGANISATION)
}

/** The organisation of the stories, with its people, a client and a site. */
export async function makeStoryOrganisation(admin: pg.Pool): Promise<{ clientId: string, siteId: string }> {
  const [clientId, siteId] = [randomUUID(), randomUUID()]
  await admin.query(`insert into organisation (id, name, code, time_zone) values ($1, 'Story Fence', 'STO', 'America/New_York')`, [ORGANISATION])
  for (const [name, id] of Object.entries(PEOPLE)) {
    await admin.query('insert into account (id, email, name) values ($1, $2, $3)', [id, `${name}@story.example`, name])
    if (ROLE_OF[id]) await admin.query('insert into membership (organisation_id, account_id, role) values ($1, $2, $3)', [ORGANISATION, id, ROLE_OF[id]])
  }
  await admin.query(`insert into client (organisation_id, id, name) values ($1, $2, 'Story school')`, [ORGANISATION, clientId])
  await admin.query(`insert into site (organisation_id, id, client_id, name, time_zone) values ($1, $2, $3, 'Story yard', 'America/New_York')`, [ORGANISATION, siteId, clientId])
  return { clientId, siteId }
}

let rounds = 0
/** A job with an open round, given to the crew, and a story that writes for it. */
export async function makeRound(admin: pg.Pool, at: { clientId: string, siteId: string }, basis = basisOf()): Promise<StoryAt> {
  const [job, round, number] = [randomUUID(), randomUUID(), ++rounds]
  const story = new StoryAt(job, round, 100 + number, basis)
  await admin.query(`insert into job (organisation_id, id, number, site_id, client_id, title, system, language, checklists, created_by) values ($1, $2, $3, $4, $5, 'Story', 'imperial', 'en', '["school-grounds"]', $6)`,
    [ORGANISATION, job, number, at.siteId, at.clientId, PEOPLE.manager])
  await admin.query(`insert into job_given (organisation_id, job_id, account_id, given_as) values ($1, $2, $3, 'crew')`, [ORGANISATION, job, PEOPLE.crew])
  await admin.query('insert into basis (organisation_id, job_id, digest, text, written_by) values ($1, $2, $3, $4, $5)', [ORGANISATION, job, story.basis, canonicalJson(basis), PEOPLE.manager])
  await admin.query('insert into round (organisation_id, id, job_id, number, basis, opened_by) values ($1, $2, $3, 1, $4, $5)', [ORGANISATION, round, job, story.basis, PEOPLE.manager])
  return story
}
