import pg from 'pg'
import { jobListSchema } from '#shared/api/job'
import { setPool } from '#server/database/client'
import { countJobs, jobListSql } from '#server/database/queries/job'
import type { Session } from '#server/database/withSession'
import { withSession } from '#server/database/withSession'
import { listJobs } from '#server/services/job/listJobs'
import { cloneDatabase } from '../helpers/postgres'
import { compare, type Figure } from './measure'

const ORGANISATIONS = 20
const JOBS = 100_000
const id = (kind: number, number: number) => `0000000${kind}-0000-4000-8000-${String(number).padStart(12, '0')}`

/** 100,000 jobs of 20 organisations: a filtered page through row-level security, against the same SQL run bare in a transaction by a role that sees everything. */
export default async function bench(): Promise<Figure[]> {
  const database = await cloneDatabase()
  const admin = new pg.Pool({ connectionString: database.adminUrl, max: 1 })
  const app = new pg.Pool({ connectionString: database.appUrl, max: 1 })
  setPool(app)
  try {
    await fill(admin)
    const who: Session = { accountId: id(1, 3), standing: 'staff', organisationId: id(2, 3), role: 'manager' }
    const bare = async <T>(work: (client: pg.PoolClient) => Promise<T>): Promise<T> => {
      const client = await admin.connect()
      try {
        await client.query('begin')
        await client.query(`select set_config('app.organisation_id', $1, true)`, [who.organisationId])
        const answer = await work(client)
        await client.query('commit')
        return answer
      }
      finally { client.release() }
    }

    const figures: Figure[] = []
    for (const [name, asked] of [
      ['the first page of what waits for the manager', { filter: 'yours' }],
      ['a page of this week\'s jobs found by two words', { filter: 'thisWeek', find: 'north school' }],
      ['a later page in order of number', { filter: 'all', sort: 'number', after: `${id(3, 0)}.2000` }],
    ] as const) {
      const query = jobListSchema.parse(asked)
      const { text, values } = jobListSql(query)
      const [ours, base] = [await withSession(who, async tx => (await tx.client.query(text, values)).rows), await bare(async client => (await client.query(text, values)).rows)]
      if (ours.length < 5 || JSON.stringify(ours) !== JSON.stringify(base)) throw new Error(`"${name}" gives ${ours.length} and ${base.length} rows`)
      figures.push(await compare(`${name}, among 100,000`, 1.3, { ours: () => withSession(who, tx => tx.client.query(text, values)), base: () => bare(client => client.query(text, values)) }, { rounds: 120, warmUps: 30, beside: null }))
    }
    const query = jobListSchema.parse({ filter: 'yours' })
    const { text, values } = jobListSql(query)
    // What the screen asks for: the page, its rows made ready, and how many each filter holds.
    figures.push(await compare('the whole answer of the list, page and counts, against both queries bare', 1.3, {
      ours: () => listJobs(who, query),
      base: () => bare(async (client) => { await client.query(text, values); await countJobs({ client } as never) }),
    }, { rounds: 120, warmUps: 30, beside: null }))
    return figures
  }
  finally {
    await app.end()
    await admin.end()
    await database.drop()
  }
}

async function fill(admin: pg.Pool): Promise<void> {
  const many = (sql: string, count: number) => admin.query(sql.replace('$series', `generate_series(0, ${count - 1}) as g(n)`))
  const uuid = (kind: number, expression: string) => `('0000000${kind}-0000-4000-8000-' || lpad((${expression})::text, 12, '0'))::uuid`
  await many(`insert into organisation (id, name, code, time_zone) select ${uuid(2, 'n')}, 'Fence ' || n, 'F' || chr(65 + n), 'America/New_York' from $series`, ORGANISATIONS)
  await many(`insert into account (id, email, name) select ${uuid(1, 'n')}, 'manager' || n || '@bench.example', 'Manager' from $series`, ORGANISATIONS)
  await many(`insert into membership (organisation_id, account_id, role) select ${uuid(2, 'n')}, ${uuid(1, 'n')}, 'manager' from $series`, ORGANISATIONS)
  await many(`insert into client (organisation_id, id, name) select ${uuid(2, `n % ${ORGANISATIONS}`)}, ${uuid(4, 'n')}, 'Client ' || n from $series`, ORGANISATIONS * 25)
  await many(`insert into site (organisation_id, id, client_id, name, time_zone) select ${uuid(2, `n % ${ORGANISATIONS}`)}, ${uuid(5, 'n')}, ${uuid(4, `n % ${ORGANISATIONS * 25}`)}, (array['North', 'South', 'Mill', 'Park'])[n / ${ORGANISATIONS} % 4 + 1] || ' school ' || n, 'America/New_York' from $series`, ORGANISATIONS * 100)
  const site = `n % ${ORGANISATIONS * 100}`
  await many(
    `insert into job (organisation_id, id, number, site_id, client_id, title, needed_by, system, language, checklists, state, move_by, move, move_count, move_since, strip, open_tags, held_out, search_text, created_by)
     select ${uuid(2, `n % ${ORGANISATIONS}`)}, ${uuid(3, 'n')}, n / ${ORGANISATIONS} + 1, ${uuid(5, site)}, ${uuid(4, `(${site}) % ${ORGANISATIONS * 25}`)}, 'Job ' || n, current_date + (n / ${ORGANISATIONS} * 7 % 400) - 200, 'imperial', 'en', '["school-grounds"]',
            s.state, case when n / ${ORGANISATIONS} % 5 = 0 then 'manager' else 'crew' end, case when n / ${ORGANISATIONS} % 5 = 0 then 'seal' else 'correct' end, 1, now() - n * interval '1 minute',
            jsonb_build_object('elements', (select jsonb_agg(jsonb_build_object('id', ${uuid(6, 'n * 10 + e')}, 'kind', 'run', 'length', 400000000 + e)) from generate_series(0, 7) e), 'marks', '{}'::jsonb),
            n % 7, n % 3, lower(lpad((n / ${ORGANISATIONS} + 1)::text, 4, '0') || ' job ' || n || ' ' || (array['north', 'south', 'mill', 'park'])[(${site}) / ${ORGANISATIONS} % 4 + 1] || ' school ' || (${site})), ${uuid(1, `n % ${ORGANISATIONS}`)}
       from $series cross join lateral (select (array['walking', 'correcting', 'sealed', 'closed', 'closed', 'closed', 'signing', 'closed'])[n / ${ORGANISATIONS} % 8 + 1] as state) s`, JOBS)
  await admin.query('analyze')
}
