import { createHash, randomBytes, randomUUID } from 'node:crypto'
import sharp from 'sharp'
import { uuidv7 } from 'uuidv7'
import { makeEntry } from '#shared/entry/makeEntry'
import type { Permission } from '#shared/permission/permission'
import { DEMO_PASSWORD } from '../../server/demo/people'
import type { DemoActor, DemoGround } from './demoGround'

/** What one contractor of the demo has, to be asked for by its own people and by others. */
export interface Side {
  key: 'tarnbeck' | 'osprey'
  id: string
  clientId: string
  contactId: string
  siteId: string
  authorityId: string
  jobId: string
  roundId: string
  /** A job that was signed, ready to be sealed; tarnbeck alone. */
  signedJobId: string
  recordId: string
  deficiencyId: string
  photo: string
  recordPhoto: string
  accounts: Record<DemoActor, string>
}

/** A request that a route takes. */
export interface Call { method: string, path: string, body?: unknown, headers?: Record<string, string> }
type Statuses = number | (Partial<Record<DemoActor, number>> & { else: number })

/** One route, as the test of every role calls it. A file under server/api or server/routes without a row here fails that test. */
export interface RouteRow {
  /** Under server/. */
  file: string
  permission: Permission | 'public'
  /** A valid call about what that side has; made anew each time, with ids of its own. */
  call: (side: Side, demo: DemoGround, actor: DemoActor) => Call | Promise<Call>
  /** Status for whoever may; 200 unless told. */
  ok?: Statuses
  /** Status for the other contractor's people, who may: 404 unless told; null where the call is about nobody in particular. */
  foreign?: Statuses | null
  /** The same call once more: the same status and body unless told; null where it is not tried. */
  again?: Statuses | null
  /** The same call answers with the same body too (true unless told). */
  sameBody?: false
  /** Ends or changes the caller's session: each call needs one of its own. */
  ownSession?: true
  maxBytes?: number
  /** Ids in the answer, and the SQL of those that are theirs ($1 organisation, $2 account), by who asks. */
  rows?: { ids: (json: never, text: string) => string[], staff: string, crew?: string, client?: string }
}

const get = (path: string): Call => ({ method: 'GET', path })
export const statusFor = (statuses: Statuses | undefined, actor: DemoActor, otherwise: number) => statuses === undefined ? otherwise : typeof statuses === 'number' ? statuses : statuses[actor] ?? statuses.else

/** The receipt that the contact signs in this table, before it is read back. */
const RECEIPT = '0f2c7d84-5b1e-4c39-8d10-2a7be40c9a35'

/** A JPEG in its final form that no other call has. */
export async function finalPhoto(width = 64): Promise<{ bytes: Buffer, digest: string }> {
  const bytes = await sharp(randomBytes(width * 48 * 3), { raw: { width, height: 48, channels: 3 } }).jpeg().toBuffer()
  return { bytes, digest: createHash('sha256').update(bytes).digest('hex') }
}

export function noteWire(side: Pick<Side, 'id' | 'jobId' | 'roundId'>, author: string, more: { id?: string, words?: string, answers?: string[], replaces?: string[], device?: string } = {}) {
  const { words = 'Mulch comes on Friday.', ...about } = more
  return makeEntry({ kind: 'note', id: uuidv7(), salt: randomBytes(16).toString('hex'), madeAt: '2026-11-30T09:00:00-05:00', organisation: side.id, job: side.jobId, round: side.roundId, author, device: uuidv7(), payload: { words, photos: [] }, ...about }).wire
}

const jobBody = (side: Side) => ({
  title: 'Back fence', neededBy: '2026-12-24', onsiteName: '', onsitePhone: '', emergencyName: '', emergencyPhone: '', contract: '', permit: '', buildingCode: '', gateTag: '',
  system: 'imperial', language: 'en', checklists: ['school-grounds'], given: [{ accountId: side.accounts.inspector, as: 'inspector' }, { accountId: side.accounts.crew, as: 'crew' }],
})
const provision = (side: Side, setting: 'school' | 'pool' = 'school') => ({
  authorityId: side.authorityId, clientId: null,
  provision: {
    id: randomUUID(), kind: 'authority', effect: 'add', measurand: 'fence-height', setting, name: 'Velmor County', citation: 'Sec. 4-12', confirmedBy: 'A. Clerk', confirmedOn: '2026-11-02',
    limit: { datum: 'ground-outside', unit: 'length', low: { imperial: 585_216_000, inclusive: true }, high: null, avoid: null },
  },
})

const aQuestion = () => ({
  id: randomUUID(), words: 'Which of the two holds at this gate?',
  about: { title: { en: 'Latch release above the ground', es: 'Pestillo sobre el suelo' }, tags: ['G1'], measurand: 'latch-release-height', unit: 'length', datum: 'ground', setting: 'school', limits: [], gap: null },
})
/** A question of that side that nobody has answered. */
async function askedOn(side: Side, { admin }: DemoGround): Promise<string> {
  const { id, words, about } = aQuestion()
  await admin.query('insert into question (organisation_id, id, job_id, about, words, written_by) values ($1, $2, $3, $4, $5, $6)', [side.id, id, side.jobId, JSON.stringify(about), words, side.accounts.manager])
  return id
}
/** A sheet of that side, handed over on paper. */
async function sheetOf(side: Side, { admin }: DemoGround): Promise<string> {
  const id = randomUUID()
  const text = JSON.stringify({
    format: 'smoothside-questions', version: 1, id, language: 'en', system: 'imperial', at: '2026-11-20T09:00:00-05:00', zones: {}, organisation: 'A fence crew', from: { name: 'Margit Hale', email: '' }, to: 'Velmor County',
    job: { code: 'AA-0001', title: '', permit: '' }, site: { name: 'A yard', address: '' }, client: 'A client', message: '', questions: [aQuestion()],
  })
  await admin.query('insert into question_sheet (organisation_id, id, job_id, name, text, sent_by) values ($1, $2, $3, $4, $5, $6)', [side.id, id, side.jobId, 'Velmor County', text, side.accounts.manager])
  return id
}

const GIVEN = 'exists (select 1 from job_given g where g.organisation_id = j.organisation_id and g.job_id = j.id and g.account_id = $2)'
const SENT = `select p.record_id::text as id from recipient p join contact c on c.organisation_id = p.organisation_id and c.id = p.contact_id
  join record r on r.organisation_id = p.organisation_id and r.id = p.record_id where c.account_id = $2 and r.sealing = 'sealed'`
const CODES = `select o.code || '-' || lpad(j.number::text, 4, '0') as id from job j join organisation o on o.id = j.organisation_id`
const firstCells = (_: unknown, text: string) => text.split('\r\n').slice(1).map(row => row.split(',')[0]!)
const idsOf = (json: { id: string }[]) => json.map(one => one.id)

/** An entry of some job that another person of the office asked to be erased. */
async function askedErasure(side: Side, admin: DemoGround['admin'], actor: DemoActor): Promise<string> {
  const id = randomUUID()
  await admin.query(`insert into erasure (organisation_id, id, job_id, entry_id, reason, asked_by) select organisation_id, $2, job_id, id, 'The parents asked.', $3 from entry where organisation_id = $1 and kind = 'walkOpened' limit 1`,
    [side.id, id, side.accounts[actor === 'manager' ? 'administrator' : 'manager']])
  return id
}

export const ROUTES: RouteRow[] = [
  { file: 'api/account/act-for.post.ts', permission: 'account.own', call: (side, _, actor) => ({ method: 'POST', path: '/api/account/act-for', body: actor === 'client' ? { standing: 'client', organisationId: null } : { standing: actor === 'crew' ? 'crew' : 'staff', organisationId: side.id } }), foreign: { client: 200, else: 403 }, ownSession: true },
  { file: 'api/account/links/[token].get.ts', permission: 'public', call: () => get(`/api/account/links/${'a'.repeat(43)}`), ok: 404, foreign: null },
  { file: 'api/account/links/[token].post.ts', permission: 'public', call: () => ({ method: 'POST', path: `/api/account/links/${'a'.repeat(43)}`, body: {} }), ok: 404, foreign: null },
  { file: 'api/account/me.get.ts', permission: 'account.own', call: () => get('/api/account/me'), foreign: null, rows: { ids: (json: { account: { id: string } }) => [json.account.id], staff: 'select $2::text as id where $1::text is not null', client: 'select $2::text as id where $1::text is not null' } },
  { file: 'api/account/me.patch.ts', permission: 'account.own', call: () => ({ method: 'PATCH', path: '/api/account/me', body: { language: 'en' } }), foreign: null },
  { file: 'api/account/reset.post.ts', permission: 'public', call: () => ({ method: 'POST', path: '/api/account/reset', body: { email: `${randomUUID()}@nowhere.example` } }), ok: 202, foreign: null },
  { file: 'api/account/sign-in.post.ts', permission: 'public', call: () => ({ method: 'POST', path: '/api/account/sign-in', body: { email: `${randomUUID()}@nowhere.example`, password: 'not the one' } }), ok: 401, foreign: null },
  { file: 'api/account/sign-out.post.ts', permission: 'account.own', call: () => ({ method: 'POST', path: '/api/account/sign-out', body: {} }), foreign: null, again: 401, ownSession: true },
  { file: 'api/authorities/index.get.ts', permission: 'numbers.read', call: () => get('/api/authorities'), foreign: null, rows: { ids: idsOf, staff: 'select id from authority where organisation_id = $1' } },
  { file: 'api/authorities/index.put.ts', permission: 'numbers.write', call: () => ({ method: 'PUT', path: '/api/authorities', body: { id: randomUUID(), name: `Town of ${randomUUID()}` } }), foreign: null },
  { file: 'api/check/[key].get.ts', permission: 'public', call: () => get(`/api/check/${'0'.repeat(64)}`), foreign: null },
  { file: 'api/check/index.post.ts', permission: 'public', call: () => ({ method: 'POST', path: '/api/check', body: Buffer.from('no PDF at all'), headers: { 'content-type': 'application/pdf' } }), foreign: null },
  {
    file: 'api/erasures/[erasureId]/done.post.ts', permission: 'erasure.write',
    call: async (side, { admin }, actor) => ({ method: 'POST', path: `/api/erasures/${await askedErasure(side, admin, actor)}/done`, body: {} }),
  },
  { file: 'api/erasures/[erasureId]/index.delete.ts', permission: 'erasure.write', call: async (side, { admin }, actor) => ({ method: 'DELETE', path: `/api/erasures/${await askedErasure(side, admin, actor)}` }), again: 404 },
  { file: 'api/jobs/[jobId]/erasures/index.get.ts', permission: 'erasure.write', call: side => get(`/api/jobs/${side.jobId}/erasures`) },
  { file: 'api/jobs/[jobId]/erasures/index.post.ts', permission: 'erasure.write', ok: 201, call: side => ({ method: 'POST', path: `/api/jobs/${side.jobId}/erasures`, body: { id: randomUUID(), entryId: null, photo: side.photo, reason: 'The parents asked.' } }), foreign: 404 },
  { file: 'api/jobs/[jobId]/hold.put.ts', permission: 'erasure.write', call: side => ({ method: 'PUT', path: `/api/jobs/${side.jobId}/hold`, body: { reason: null } }) },
  { file: 'api/checklists.get.ts', permission: 'checklist.read', call: () => get('/api/checklists'), foreign: null },
  { file: 'api/clients/index.get.ts', permission: 'client.read', call: () => get('/api/clients'), foreign: null, rows: { ids: (json: { id: string, contacts: { id: string }[] }[]) => json.flatMap(one => [one.id, ...idsOf(one.contacts)]), staff: 'select id from client where organisation_id = $1 union all select id from contact where organisation_id = $1 and ended_at is null' } },
  { file: 'api/clients/index.put.ts', permission: 'client.write', call: () => ({ method: 'PUT', path: '/api/clients', body: { id: randomUUID(), name: `Parks of ${randomUUID()}`, address: '' } }), foreign: null },
  { file: 'api/clients/[clientId]/contacts.put.ts', permission: 'client.write', call: side => ({ method: 'PUT', path: `/api/clients/${side.clientId}/contacts`, body: { id: randomUUID(), name: 'Wen Solo', email: `${randomUUID()}@parks.example`, phone: '', title: '', accepts: false, mailbox: false } }) },
  {
    file: 'api/clients/[clientId]/contacts/[contactId].delete.ts', permission: 'client.write', again: 404,
    async call(side, { admin }) {
      const id = randomUUID()
      await admin.query('insert into contact (organisation_id, id, client_id, name, email) values ($1, $2, $3, $4, $5)', [side.id, id, side.clientId, 'Ends soon', `${id}@parks.example`])
      return { method: 'DELETE', path: `/api/clients/${side.clientId}/contacts/${id}` }
    },
  },
  { file: 'api/deficiencies/index.get.ts', permission: 'deficiency.assign', call: () => get('/api/deficiencies?most=200'), foreign: null, rows: { ids: (json: { rows: { id: string }[] }) => idsOf(json.rows), staff: `select id from deficiency_state where organisation_id = $1 and state not like 'ended%'` } },
  { file: 'api/deficiencies/[deficiencyId].get.ts', permission: 'deficiency.assign', call: side => get(`/api/deficiencies/${side.deficiencyId}`) },
  {
    file: 'api/deficiencies/assignments.post.ts', permission: 'deficiency.assign', foreign: null,
    call: side => ({ method: 'POST', path: '/api/deficiencies/assignments', body: { tags: [{ deficiencyId: side.deficiencyId, entryId: uuidv7() }], to: { account: side.accounts.crew, name: 'Luis Barrientos' }, due: '2026-12-04T15:00:00-05:00', words: 'Bring ties' } }),
  },
  { file: 'api/field/v1/jobs/[jobId]/photos/[digest].put.ts', permission: 'photo.send', call: async (side) => { const { bytes, digest } = await finalPhoto(); return { method: 'PUT', path: `/api/field/v1/jobs/${side.jobId}/photos/${digest}`, body: bytes, headers: { 'content-type': 'image/jpeg' } } } },
  { file: 'api/field/v1/jobs/[jobId]/take.post.ts', permission: 'round.take', call: side => ({ method: 'POST', path: `/api/field/v1/jobs/${side.jobId}/take`, body: { device: uuidv7(), name: 'A phone' } }) },
  {
    file: 'api/field/v1/rounds/[roundId]/entries.get.ts', permission: 'round.read', call: side => get(`/api/field/v1/rounds/${side.roundId}/entries`),
    rows: { ids: (json: { entries: { envelope: string }[] }) => json.entries.map(one => (JSON.parse(one.envelope) as { id: string }).id), staff: `select e.id from entry e join job j on j.organisation_id = e.organisation_id and j.id = e.job_id join round r on r.id = e.round_id where e.organisation_id = $1 and j.title in ('Upper lawn', 'Bus loop')` },
  },
  { file: 'api/field/v1/rounds/[roundId]/entries.post.ts', permission: 'entry.send', maxBytes: 25_000_000, call: (side, _, actor) => ({ method: 'POST', path: `/api/field/v1/rounds/${side.roundId}/entries`, body: { device: uuidv7(), entries: [noteWire(side, side.accounts[actor])], empty: false } }), sameBody: false },
  { file: 'api/jobs/index.get.ts', permission: 'job.read', call: () => get('/api/jobs?most=200'), foreign: null, rows: { ids: (json: { rows: { id: string }[] }) => idsOf(json.rows), staff: 'select id from job where organisation_id = $1', crew: `select j.id from job j where j.organisation_id = $1 and ${GIVEN}` } },
  { file: 'api/jobs/index.post.ts', permission: 'job.write', call: side => ({ method: 'POST', path: '/api/jobs', body: { id: randomUUID(), siteId: side.siteId, ...jobBody(side) } }), ok: 201, foreign: 422 },
  { file: 'api/jobs/[jobId]/index.get.ts', permission: 'job.read', call: side => get(`/api/jobs/${side.jobId}`), rows: { ids: (json: { job: { id: string } }) => [json.job.id], staff: `select id from job where organisation_id = $1 and title in ('Upper lawn', 'Bus loop')` } },
  { file: 'api/jobs/[jobId]/index.patch.ts', permission: 'job.write', call: side => ({ method: 'PATCH', path: `/api/jobs/${side.signedJobId}`, body: jobBody(side) }) },
  {
    file: 'api/jobs/[jobId]/line.put.ts', permission: 'line.write', maxBytes: 4_000_000, again: 409,
    async call(side, { admin }) {
      const { rows: [{ version, line }] } = await admin.query('select version, line from line_version where job_id = $1 order by version desc limit 1', [side.jobId])
      return { method: 'PUT', path: `/api/jobs/${side.jobId}/line`, body: { from: version, line: JSON.parse(line), why: 'Drawn again' } }
    },
  },
  { file: 'api/jobs/[jobId]/basis.post.ts', permission: 'round.basis', call: side => ({ method: 'POST', path: `/api/jobs/${side.jobId}/basis`, body: { why: 'Numbers were set' } }) },
  { file: 'api/jobs/[jobId]/limits.get.ts', permission: 'question.read', call: side => get(`/api/jobs/${side.jobId}/limits`), rows: { ids: (json: { questions: { id: string }[] }) => idsOf(json.questions), staff: `select q.id from question q join job j on j.organisation_id = q.organisation_id and j.id = q.job_id where q.organisation_id = $1 and q.state <> 'withdrawn' and j.title in ('Upper lawn', 'Bus loop')` } },
  { file: 'api/jobs/[jobId]/questions.post.ts', permission: 'question.write', call: side => ({ method: 'POST', path: `/api/jobs/${side.jobId}/questions`, body: aQuestion() }), ok: 201 },
  {
    file: 'api/jobs/[jobId]/question-sheets.post.ts', permission: 'question.write', ok: 202,
    call: async (side, demo) => ({ method: 'POST', path: `/api/jobs/${side.jobId}/question-sheets`, body: { id: randomUUID(), questions: [await askedOn(side, demo)], name: 'Velmor County, building division', email: null, message: '', language: 'en' } }),
  },
  { file: 'api/questions/[questionId].delete.ts', permission: 'question.write', call: async (side, demo) => ({ method: 'DELETE', path: `/api/questions/${await askedOn(side, demo)}` }) },
  {
    file: 'api/questions/[questionId]/answer.post.ts', permission: 'question.write', again: 409,
    call: async (side, demo) => ({ method: 'POST', path: `/api/questions/${await askedOn(side, demo)}/answer`, body: { answer: { name: 'R. Tamm', role: 'Building official', on: '2026-11-20', document: 'Letter BD-118', words: 'From the ground.' }, number: null } }),
  },
  { file: 'routes/questions/[sheetFile].get.ts', permission: 'question.read', call: async (side, demo) => get(`/questions/${await sheetOf(side, demo)}.pdf`) },
  { file: 'api/jobs/[jobId]/records.post.ts', permission: 'record.seal', call: side => ({ method: 'POST', path: `/api/jobs/${side.signedJobId}/records`, body: { id: '7d3f8c52-6a41-4a3b-9a57-1f1f4e0f6c01', scope: 'final', overDevices: null } }), ok: 202 },
  {
    file: 'api/jobs/[jobId]/trials/index.get.ts', permission: 'trial.read', call: side => get(`/api/jobs/${side.jobId}/trials`),
    rows: { ids: idsOf, staff: `select t.id from trial t join job j on j.organisation_id = t.organisation_id and j.id = t.job_id where t.organisation_id = $1 and j.title in ('Upper lawn', 'Bus loop')` },
  },
  {
    file: 'api/jobs/[jobId]/trials/index.put.ts', permission: 'trial.write', maxBytes: 60_000,
    async call(side, { admin }) {
      const { rows: [{ id: element }] } = await admin.query('select e.id from element e join job j on j.organisation_id = e.organisation_id and j.site_id = e.site_id where j.id = $1 order by e.tag limit 1', [side.jobId])
      return { method: 'PUT', path: `/api/jobs/${side.jobId}/trials`, body: { id: randomUUID(), element, trial: { kind: 'frame', version: 1, system: 'imperial', width: 390_144_000, height: 487_680_000, first: 625_000_000, second: 624_000_000, error: 508_000 } } }
    },
  },
  {
    file: 'api/instruments/[id].delete.ts', permission: 'instrument.write', again: 404,
    async call(side, { admin }) {
      const id = randomUUID()
      await admin.query(`insert into instrument (organisation_id, id, name, unit, uncertainty, text, source, written_by) values ($1, $2, $3, 'length', 508000, '1/16 in', 'class on the tape', $4)`, [side.id, id, `tape ${id}`, side.accounts.manager])
      return { method: 'DELETE', path: `/api/instruments/${id}` }
    },
  },
  { file: 'api/instruments/index.get.ts', permission: 'instrument.read', call: () => get('/api/instruments'), foreign: null, rows: { ids: idsOf, staff: 'select id from instrument where organisation_id = $1 and ended_at is null', crew: 'select id from instrument where organisation_id = $1 and ended_at is null' } },
  { file: 'api/instruments/index.put.ts', permission: 'instrument.write', call: () => ({ method: 'PUT', path: '/api/instruments', body: { id: randomUUID(), name: `tape ${randomUUID()}`, unit: 'length', uncertainty: 508_000, text: '1/16 in', source: 'class on the tape', checkedOn: null } }), foreign: null },
  {
    file: 'api/numbers/[id].delete.ts', permission: 'numbers.write', again: 404,
    async call(side, { admin }) {
      const { authorityId, provision: one } = provision(side, 'pool')
      await admin.query(`insert into provision (organisation_id, id, authority_id, setting, measurand, provision, written_by) values ($1, $2, $3, 'pool', 'fence-height', $4, $5)`, [side.id, one.id, authorityId, JSON.stringify(one), side.accounts.manager])
      return { method: 'DELETE', path: `/api/numbers/${one.id}` }
    },
  },
  { file: 'api/numbers/index.get.ts', permission: 'numbers.read', call: side => get(`/api/numbers?authorityId=${side.authorityId}`), foreign: null, rows: { ids: idsOf, staff: `select p.id from provision p join authority a on a.organisation_id = p.organisation_id and a.id = p.authority_id where p.organisation_id = $1 and p.ended_at is null and a.name = 'Velmor County'` } },
  { file: 'api/numbers/index.put.ts', permission: 'numbers.write', call: side => ({ method: 'PUT', path: '/api/numbers', body: provision(side) }), foreign: 422 },
  { file: 'api/numbers/page.get.ts', permission: 'numbers.read', call: side => get(`/api/numbers/page?setting=school&authorityId=${side.authorityId}`), foreign: null, rows: { ids: (json: { provisions: { id: string }[] }) => idsOf(json.provisions), staff: `select p.id from provision p join authority a on a.organisation_id = p.organisation_id and a.id = p.authority_id where p.organisation_id = $1 and p.ended_at is null and a.name = 'Velmor County' and p.setting = 'school'` } },
  { file: 'api/people/index.get.ts', permission: 'people.read', call: () => get('/api/people'), foreign: null, rows: { ids: (json: { accountId: string }[]) => json.map(one => one.accountId), staff: 'select account_id as id from membership where organisation_id = $1' } },
  { file: 'api/people/index.post.ts', permission: 'people.write', call: () => ({ method: 'POST', path: '/api/people', body: { email: `${randomUUID()}@trade.example`, name: 'Ode Marsh', role: 'crew', language: 'es' } }), ok: 202, foreign: null },
  {
    file: 'api/people/[accountId].patch.ts', permission: 'people.write',
    async call(side, { admin }) {
      const id = randomUUID()
      await admin.query('insert into account (id, email, name) values ($1, $2, $3)', [id, `${id}@trade.example`, 'Ode Marsh'])
      await admin.query(`insert into membership (organisation_id, account_id, role) values ($1, $2, 'crew')`, [side.id, id])
      return { method: 'PATCH', path: `/api/people/${id}`, body: { role: 'inspector' } }
    },
  },
  { file: 'api/photos/[digest].get.ts', permission: 'photo.read', call: side => get(`/api/photos/${side.photo}`), ok: { client: 404, else: 200 } },
  { file: 'api/portal/sites/index.get.ts', permission: 'portal.read', call: () => get('/api/portal/sites'), foreign: null, rows: { ids: idsOf, staff: '', client: `select distinct j.site_id::text as id from (${SENT}) s join record r on r.id = s.id::uuid join job j on j.id = r.job_id where $1::text is not null` } },
  { file: 'api/portal/sites/[siteId].get.ts', permission: 'portal.read', call: side => get(`/api/portal/sites/${side.siteId}`) },
  { file: 'api/records/index.get.ts', permission: 'record.read', call: () => get('/api/records'), foreign: null, rows: { ids: idsOf, staff: 'select id from record where organisation_id = $1', client: `${SENT} and $1::text is not null` } },
  { file: 'api/records/[recordId]/index.get.ts', permission: 'record.read', call: side => get(`/api/records/${side.recordId}`), sameBody: false },
  { file: 'api/records/[recordId]/index.patch.ts', permission: 'record.standing', call: side => ({ method: 'PATCH', path: `/api/records/${side.recordId}`, body: { standing: 'underQuestion', reason: 'A post was found loose.' } }) },
  { file: 'api/records/[recordId]/seal.post.ts', permission: 'record.seal', call: side => ({ method: 'POST', path: `/api/records/${side.recordId}/seal`, body: {} }) },
  { file: 'api/records/[recordId]/transmittals.post.ts', permission: 'transmittal.send', call: side => ({ method: 'POST', path: `/api/records/${side.recordId}/transmittals`, body: { id: randomUUID(), contacts: [side.contactId], message: '' } }), ok: 202 },
  {
    file: 'api/records/[recordId]/acceptances.post.ts', permission: 'acceptance.write', maxBytes: 2_500_000, ok: 201,
    async call(side, { admin }) {
      const { rows: [{ document_digest: document }] } = await admin.query('select document_digest from record where id = $1', [side.recordId])
      return { method: 'POST', path: `/api/records/${side.recordId}/acceptances`, body: { id: RECEIPT, meaning: 'receivedCopy', document, language: 'en', deviation: null, named: false, typed: 'Abel Quist', strokes: null, words: null } }
    },
  },
  { file: 'api/sites/index.get.ts', permission: 'site.read', call: () => get('/api/sites'), foreign: null, rows: { ids: idsOf, staff: 'select id from site where organisation_id = $1', crew: `select distinct j.site_id as id from job j where j.organisation_id = $1 and ${GIVEN}` } },
  { file: 'api/sites/index.put.ts', permission: 'site.write', call: side => ({ method: 'PUT', path: '/api/sites', body: { id: randomUUID(), clientId: side.clientId, name: `Yard ${randomUUID()}`, address: '', timeZone: 'America/New_York', authorityId: null } }), foreign: 422 },
  { file: 'api/tables/jobs/[as].get.ts', permission: 'job.read', call: () => get('/api/tables/jobs/csv'), foreign: null, rows: { ids: firstCells, staff: `${CODES} where o.id = $1`, crew: `${CODES} where o.id = $1 and ${GIVEN}` } },
  { file: 'api/tables/tags/[as].get.ts', permission: 'deficiency.assign', call: () => get('/api/tables/tags/csv'), foreign: null, rows: { ids: firstCells, staff: `select tag as id from deficiency_state where organisation_id = $1 and state not like 'ended%'` } },
  { file: 'api/tables/sites/[as].get.ts', permission: 'site.read', call: () => get('/api/tables/sites/csv'), foreign: null, rows: { ids: firstCells, staff: 'select name as id from site where organisation_id = $1', crew: `select distinct s.name as id from site s join job j on j.organisation_id = s.organisation_id and j.site_id = s.id where s.organisation_id = $1 and ${GIVEN}` } },
  { file: 'api/tables/records/[as].get.ts', permission: 'record.read', call: () => get('/api/tables/records/csv'), foreign: null, rows: { ids: firstCells, staff: 'select code as id from record where organisation_id = $1', client: `select distinct r.code as id from record r join (${SENT}) s on s.id = r.id::text where $1::text is not null` } },
  { file: 'api/tables/people/[as].get.ts', permission: 'people.read', call: () => get('/api/tables/people/csv'), foreign: null, rows: { ids: firstCells, staff: 'select a.name as id from membership m join account a on a.id = m.account_id where m.organisation_id = $1' } },
  { file: 'api/tables/numbers/[as].get.ts', permission: 'numbers.read', call: side => get(`/api/tables/numbers/csv?authorityId=${side.authorityId}`), foreign: 200 },
  { file: 'api/log/index.get.ts', permission: 'log.epoch', call: () => get('/api/log'), foreign: null },
  { file: 'api/log/epochs.post.ts', permission: 'log.epoch', call: () => ({ method: 'POST', path: '/api/log/epochs', body: { reason: 'To be tidy.' } }), ok: 409, foreign: null },
  { file: 'routes/acceptances/[acceptanceFile].get.ts', permission: 'record.read', call: () => get(`/acceptances/${RECEIPT}.pdf`) },
  { file: 'routes/health/live.get.ts', permission: 'public', call: () => get('/health/live'), foreign: null },
  { file: 'routes/health/ready.get.ts', permission: 'public', call: () => get('/health/ready'), foreign: null, sameBody: false },
  { file: 'routes/records/files/[recordFile].get.ts', permission: 'record.read', call: side => get(`/records/${side.recordId}.pdf`) },
  { file: 'routes/records/[recordId]/photos/[photoFile].get.ts', permission: 'record.read', call: side => get(`/records/${side.recordId}/photos/${side.recordPhoto}.jpg`) },
  // Last, since it ends every session of the person.
  { file: 'api/account/password.post.ts', permission: 'account.own', call: () => ({ method: 'POST', path: '/api/account/password', body: { now: DEMO_PASSWORD, next: DEMO_PASSWORD } }), ok: { client: 422, else: 200 }, foreign: null, ownSession: true },
]
