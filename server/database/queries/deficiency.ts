import type { TagFilter, TagListQuery, TagListRow, TagSort } from '../../../shared/api/deficiency'
import type { DeficiencyOutcome } from '../../../shared/round/outcome'
import type { Tx } from '../withSession'

const STATES: Record<Exclude<TagFilter, 'open'>, string[]> = {
  toCorrect: ['open', 'assigned', 'disputed'], waiting: ['cannot'], offered: ['offered'], corrected: ['corrected'],
  settled: ['endedCorrected', 'endedAccepted', 'endedDecided', 'endedReferred', 'endedInError'],
}
const listed = (words: string[]) => words.map(word => `'${word}'`).join(', ')
const OPEN = `d.state not in (${listed(STATES.settled)}) and j.state <> 'closed'`
const FILTERS: Record<TagFilter, string> = {
  open: OPEN,
  ...Object.fromEntries(Object.entries(STATES).map(([name, states]) => [name, `d.state in (${listed(states)})${name === 'settled' ? '' : ` and j.state <> 'closed'`}`])) as Record<Exclude<TagFilter, 'open'>, string>,
}
const OVERDUE = `${OPEN} and d.state <> 'corrected' and d.due < now()`

/** Order, and the value that a page goes on from. What has no due date comes last. */
const SORTS: Record<TagSort, { key: string, type: string }> = {
  due: { key: `coalesce(d.due, 'infinity')`, type: 'timestamptz' },
  job: { key: 'j.number', type: 'int' },
  tag: { key: 'd.tag collate "C"', type: 'text' },
  class: { key: `array_position(array['outOfUse', 'correctFirst', 'ownerMayAccept'], d.class)`, type: 'int' },
  state: { key: `array_position(array['open', 'disputed', 'assigned', 'cannot', 'offered', 'corrected', ${listed(STATES.settled)}], d.state)`, type: 'int' },
}

const FROM = `from deficiency_state d
  join job j on j.organisation_id = d.organisation_id and j.id = d.job_id
  join organisation o on o.id = d.organisation_id
  join site s on s.organisation_id = j.organisation_id and s.id = j.site_id`
const ELEMENT = 'left join element e on e.organisation_id = d.organisation_id and e.id = d.element_id'

// An element that the field added is only on the line as built. The name of who has it stands in the assignment, since it may be somebody without an account.
const COLUMNS = `d.id, d.tag, d.class, d.state, d.check_id as "checkId", d.due, d.job_id as "jobId", j.number, j.title as "jobTitle", j.system, s.name as "siteName", o.code as "organisationCode",
  coalesce(e.tag, (select jsonb_path_query_first(st.outcome->'line', '$.sides[*].elements[*] ? (@.id == $x).tag', jsonb_build_object('x', d.element_id)) #>> '{}'
     from round_state st where st.organisation_id = d.organisation_id and st.round_id = d.round_id), '') as "elementTag", d.outcome->'place' as place, d.outcome->>'held' as held, d.outcome->>'waitsFor' as "waitsFor", d.outcome->>'until' as until,
  (select a.payload->'to'->>'name' from entry a where a.organisation_id = d.organisation_id and a.kind = 'assignment'
     and a.id in (select x::uuid from jsonb_array_elements_text(d.outcome->'history') x) order by a.accepted_at desc, a.number desc limit 1) as "givenTo"`

export type TagRowOfStore = Omit<TagListRow, 'jobCode' | 'title' | 'unit'> & { number: number, organisationCode: string, key?: string }

export async function listTags(tx: Tx, query: TagListQuery): Promise<TagRowOfStore[]> {
  const { key, type } = SORTS[query.sort]
  const values: unknown[] = []
  const bind = (value: unknown) => `$${values.push(value)}`
  const wheres = ['d.organisation_id = app_organisation()', FILTERS[query.filter]]
  for (const word of query.find.toLowerCase().split(/\s+/).filter(Boolean)) {
    const like = bind(`%${word.replace(/[%_\\]/g, '\\$&')}%`)
    wheres.push(`(j.search_text like ${like} or lower(d.tag) like ${like} or lower(e.tag) like ${like} or d.check_id like ${like})`)
  }
  if (query.class) wheres.push(`d.class = ${bind(query.class)}`)
  if (query.given) wheres.push(query.given === 'nobody' ? `d.assigned_to is null and d.state in ('open', 'disputed')` : `d.assigned_to = ${bind(query.given)}::uuid`)
  if (query.jobId) wheres.push(`d.job_id = ${bind(query.jobId)}::uuid`)
  if (query.overdue) wheres.push(OVERDUE)
  const [than, way] = query.descending ? ['<', 'desc'] : ['>', 'asc']
  if (query.after) wheres.push(`(${key}, d.id) ${than} (${bind(query.after.slice(37))}::${type}, ${bind(query.after.slice(0, 36))}::uuid)`)
  const { rows } = await tx.client.query<TagRowOfStore>(`select ${COLUMNS}, (${key})::text as key ${FROM} ${ELEMENT} where ${wheres.join(' and ')} order by ${key} ${way}, d.id ${way} limit ${query.most + 1}`, values)
  return rows
}

export async function countTags(tx: Tx): Promise<Record<TagFilter | 'overdue', number>> {
  const counts = Object.entries({ ...FILTERS, overdue: OVERDUE }).map(([name, where]) => `count(*) filter (where ${where})::int as "${name}"`).join(', ')
  return (await tx.client.query<Record<TagFilter | 'overdue', number>>(`select ${counts} from deficiency_state d join job j on j.organisation_id = d.organisation_id and j.id = d.job_id where d.organisation_id = app_organisation()`)).rows[0]!
}

export async function readTag(tx: Tx, deficiencyId: string): Promise<(TagRowOfStore & { history: string[] }) | undefined> {
  const { rows } = await tx.client.query<TagRowOfStore & { history: string[] }>(`select ${COLUMNS}, d.outcome->'history' as history ${FROM} ${ELEMENT} where d.organisation_id = app_organisation() and d.id = $1`, [deficiencyId])
  return rows[0]
}

/** The texts of entries with their numbers, and who wrote them. */
export async function entryTexts(tx: Tx, ids: string[]): Promise<{ id: string, number: number, envelope: string, payload: string }[]> {
  const { rows } = await tx.client.query<{ id: string, number: number, envelope: string, payload: string }>(
    `select id, number, envelope_text as envelope, coalesce(payload_text, '') as payload from entry where organisation_id = app_organisation() and id = any($1::uuid[])`, [ids])
  return rows
}

export async function namesOf(tx: Tx, accounts: string[]): Promise<Record<string, string>> {
  const { rows } = await tx.client.query<{ id: string, name: string }>('select id, name from account where id = any($1::uuid[])', [[...new Set(accounts)]])
  return Object.fromEntries(rows.map(row => [row.id, row.name]))
}

/** A tag with all that the next word on it names and stands under. `round` is where it stands now. */
export interface TagToAnswer { id: string, jobId: string, outcome: DeficiencyOutcome, roundId: string, roundState: 'open' | 'frozen' | 'sealed', basis: string, kinds: Record<string, string> }

export async function tagsToAnswer(tx: Tx, ids: string[]): Promise<TagToAnswer[]> {
  const { rows } = await tx.client.query<TagToAnswer>(
    `select d.id, d.job_id as "jobId", d.outcome, r.id as "roundId", r.state as "roundState", coalesce(st.outcome->>'basis', r.basis) as basis,
            coalesce((select json_object_agg(e.id, e.kind) from entry e where e.organisation_id = d.organisation_id and e.id in (select x::uuid from jsonb_array_elements_text(d.outcome->'history') x)), '{}') as kinds
       from deficiency_state d join round r on r.organisation_id = d.organisation_id and r.id = d.round_id
       left join round_state st on st.organisation_id = r.organisation_id and st.round_id = r.id
      where d.organisation_id = app_organisation() and d.id = any($1::uuid[])`, [ids])
  return rows
}

/** Crew see the jobs that were given to them; others see them anyway, and nothing is written for those. */
export async function giveJob(tx: Tx, jobId: string, accounts: string[]): Promise<void> {
  await tx.client.query(
    `insert into job_given (organisation_id, job_id, account_id, given_as)
     select m.organisation_id, $1, m.account_id, 'crew' from membership m
      where m.organisation_id = app_organisation() and m.account_id = any($2::uuid[]) and m.role = 'crew' and m.ended_at is null on conflict do nothing`, [jobId, accounts])
}
