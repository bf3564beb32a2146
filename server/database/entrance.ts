import type { Role, Standing } from '../../shared/permission/permission'
import { usePool } from './client'

/** Calls of drizzle/0002_entrance.sql: what may be asked before an organisation is known. */
async function rows<T extends object>(text: string, values: unknown[]): Promise<T[]> {
  return (await usePool().query<T>(text, values)).rows
}

export interface SessionRow { account_id: string, email: string, name: string, language: 'en' | 'es', standing: Standing, role: Role | null, organisation_id: string | null, organisation_name: string | null }
export interface StandingRow { standing: Standing, organisation_id: string | null, organisation_name: string, role: Role | null }
export interface LinkRow { purpose: 'invitation' | 'reset' | 'contact', email: string, name: string, organisation_name: string, role: Role | null, has_password: boolean, state: 'open' | 'redeemed' | 'expired' }
export interface RedeemedRow { purpose: LinkRow['purpose'], account_id: string | null, organisation_id: string | null, contact_id: string | null, record_id: string | null, role: Role | null, email: string }
export interface PublicRecordRow {
  id: string, organisation_id: string, organisation_name: string, code: string, number: number, scope: 'interim' | 'final', standing: 'current' | 'superseded' | 'underQuestion' | 'withdrawn', standing_at: Date | null, sealed_at: Date
  document_digest: string, range_digest: string, file_digest: string, leaf: string, root_certificate: string, elements: number, replaced: { tag: string, by: string, at: string }[] | null
}

export const entrance = {
  accountForSignIn: async (email: string) => (await rows<{ id: string, password_hash: string | null }>('select * from entrance.account_for_sign_in($1)', [email]))[0],
  standingsOf: (accountId: string) => rows<StandingRow>('select * from entrance.standings_of($1)', [accountId]),
  openSession: (hash: string, accountId: string, organisationId: string | null, standing: Standing, expires: Date) => rows('select entrance.session_open($1, $2, $3, $4, $5)', [hash, accountId, organisationId, standing, expires]),
  sessionOf: async (hash: string) => (await rows<SessionRow>('select * from entrance.session_of($1)', [hash]))[0],
  endSession: (hash: string) => rows('select entrance.session_end($1)', [hash]),
  endAllSessions: (accountId: string) => rows('select entrance.session_end_all($1)', [accountId]),
  makeAccount: async (id: string, email: string, name: string, language: string) => (await rows<{ account_make: string }>('select entrance.account_make($1, $2, $3, $4)', [id, email, name, language]))[0]!.account_make,
  changeAccount: (accountId: string, change: { passwordHash?: string, name?: string, language?: string }) => rows('select entrance.account_change($1, $2, $3, $4)', [accountId, change.passwordHash ?? null, change.name ?? null, change.language ?? null]),
  makeLink: (hash: string, link: { purpose: LinkRow['purpose'], accountId?: string | null, organisationId?: string | null, contactId?: string | null, recordId?: string | null, role?: Role | null, email: string }, expires: Date) =>
    rows('select entrance.link_make($1, $2, $3, $4, $5, $6, $7, $8, $9)', [hash, link.purpose, link.accountId ?? null, link.organisationId ?? null, link.contactId ?? null, link.recordId ?? null, link.role ?? null, link.email, expires]),
  linkOf: async (hash: string) => (await rows<LinkRow>('select * from entrance.link_of($1)', [hash]))[0],
  redeemLink: async (hash: string) => (await rows<RedeemedRow>('select * from entrance.link_redeem($1)', [hash]))[0],
  takeContact: (organisationId: string, contactId: string, accountId: string) => rows('select entrance.contact_take($1, $2, $3)', [organisationId, contactId, accountId]),
  takeContactsByEmail: (email: string, accountId: string) => rows('select entrance.contacts_take($1, $2)', [email, accountId]),
  takeMembership: (organisationId: string, accountId: string, role: Role) => rows('select entrance.membership_take($1, $2, $3)', [organisationId, accountId, role]),
  makeOrganisation: (organisation: { id: string, name: string, code: string, timeZone: string, system: string, language: string }) =>
    rows('select entrance.organisation_make($1, $2, $3, $4, $5, $6)', [organisation.id, organisation.name, organisation.code, organisation.timeZone, organisation.system, organisation.language]),
  recordOf: (key: string) => rows<PublicRecordRow>('select * from entrance.record_of($1)', [key]),
  acceptanceOf: async (digest: string) => (await rows<{ organisation_id: string, organisation_name: string, record_code: string, meaning: string, created_at: Date, leaf: string }>('select * from entrance.acceptance_of($1)', [digest]))[0],
  signingRoots: async () => (await rows<{ root: string }>('select entrance.signing_roots() as root', [])).map(row => row.root),
  logLeafText: async (position: number) => (await rows<{ text: string | null }>('select entrance.log_leaf_text($1) as text', [position]))[0]!.text,
  logHashes: async (from: number, to: number) => (await rows<{ hash: string }>('select hash from entrance.log_hashes($1, $2) order by position', [from, to])).map(row => row.hash),
  logSize: async () => Number((await rows<{ log_size: string }>('select entrance.log_size()', []))[0]!.log_size),
  writeLogHead: (size: number, root: string, text: string, signature: string) => rows('select entrance.log_head_write($1, $2, $3, $4)', [size, root, text, signature]),
  newestLogHead: async () => (await rows<{ size: string, epoch: number, root: string, text: string, signature: string }>('select * from entrance.log_head_newest()', []))[0],
  installation: async () => (await rows<{ store_epoch: string, log_epoch: number, witness_key: string | null, witness_certificate: string | null, worker_seen_at: Date | null, organisations: string }>('select * from entrance.installation_of()', []))[0]!,
  setWitness: (wrappedKey: string, certificate: string) => rows('select entrance.witness_set($1, $2)', [wrappedKey, certificate]),
  workerSeen: () => rows('select entrance.worker_seen()', []),
  organisationIds: async () => (await rows<{ id: string }>('select entrance.organisation_ids() as id', [])).map(row => row.id),
  unfinishedSealings: () => rows<{ organisation_id: string, id: string }>('select * from entrance.sealings_unfinished()', []),
}
