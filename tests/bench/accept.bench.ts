import { createHash, randomUUID } from 'node:crypto'
import pg from 'pg'
import type { WireEntry } from '#shared/entry/entry'
import { makeEntry } from '#shared/entry/makeEntry'
import { elementsOf } from '#shared/line/line'
import { setPool } from '#server/database/client'
import { acceptEntries } from '#server/services/entry/acceptEntries'
import { makeRound, makeStoryOrganisation, senderOf } from '../helpers/roundAt'
import { cloneDatabase } from '../helpers/postgres'
import { basisOf, bay, element, gap, look, ORGANISATION, PEOPLE, uuid } from '../helpers/roundStory'
import { compare, processorTimeOf, type Figure } from './measure'

const ENTRIES = 5000
const BATCH = 500
const [ROUNDS, WARM_UPS] = [5, 2]
const CHECKS = ['tie-ends', 'gap-below', 'post-spacing']

/** 5,000 readings of 200 runs, in the order of a walk, in batches of 500, accepted by the service (read strictly, numbered, stored, folded, lists written), against the bare INSERT of the same rows in the same batches. */
export default async function bench(): Promise<Figure[]> {
  const database = await cloneDatabase()
  const admin = new pg.Pool({ connectionString: database.adminUrl, max: 1, idleTimeoutMillis: 0 })
  const app = new pg.Pool({ connectionString: database.appUrl, max: 1, idleTimeoutMillis: 0 })
  setPool(app)
  try {
    const at = await makeStoryOrganisation(admin)
    const shape = basisOf()
    const runs = Array.from({ length: 200 }, (_, number) => element(uuid(7, number), `R${number + 1}`, { bays: 17 }))
    const basis = { ...shape, line: { ...shape.line, sides: [{ key: 'A', name: 'Long', elements: runs }] }, tasks: runs.flatMap(run => CHECKS.map(check => ({ element: run.id, check, face: null, limits: check === 'gap-below' ? ['gap'] : [] }))) }

    const batchesOf = async () => {
      const round = await makeRound(admin, at, basis)
      const wires: WireEntry[] = Array.from({ length: ENTRIES }, (_, number) => {
        const check = CHECKS[number % CHECKS.length]!
        const bad = number % 20 === 0
        return makeEntry({
          kind: 'reading', id: randomUUID(), salt: createHash('md5').update(`${round.round} ${number}`).digest('hex'), madeAt: '2026-11-30T09:00:00-05:00', organisation: ORGANISATION, job: round.job, round: round.round, walk: uuid(4, 1), author: PEOPLE.ana, device: uuid(5, 1),
          element: elementsOf(basis.line)[Math.floor(number / (ENTRIES / 200))]!.id, check, basis: round.basis, place: bay(1 + Math.floor(number % (ENTRIES / 200) / CHECKS.length)),
          payload: { value: check === 'gap-below' ? gap(bad ? 3 : 1) : look(bad ? 'finding' : 'clear'), photos: [], ...(bad ? { tag: `A${number + 1}` } : {}) },
        }).wire
      })
      return { round, batches: Array.from({ length: ENTRIES / BATCH }, (_, part) => wires.slice(part * BATCH, part * BATCH + BATCH)) }
    }

    const turns = ROUNDS + WARM_UPS
    const [ours, base] = [await Promise.all(Array.from({ length: turns }, batchesOf)), await Promise.all(Array.from({ length: turns }, batchesOf))]
    let turn = 0
    const pids = await Promise.all([admin, app].map(async pool => (await pool.query<{ pid: number }>('select pg_backend_pid() as pid')).rows[0]!.pid))
    const figures = [await compare('accepting 5,000 entries in batches of 500, against the bare INSERT of the same rows', 1.5, {
      async ours() {
        const { round, batches } = ours[turn]!
        for (const batch of batches) {
          const { results } = await acceptEntries(senderOf(PEOPLE.ana), round.round, batch)
          if (results.some(one => one.state !== 'accepted')) throw new Error('an entry was not accepted')
        }
      },
      async base() {
        const { round, batches } = base[turn++]!
        let number = 0
        for (const batch of batches) {
          // The rows are made ready beforehand in the client; the statement is the service's own.
          const rows = batch.map(wire => ({ wire, envelope: JSON.parse(wire.envelope) as { id: string, kind: string, author: string, element: string, check: string } }))
          await admin.query('begin')
          await admin.query(
            `insert into entry (organisation_id, id, round_id, number, job_id, kind, author_id, element_id, check_id, digest, envelope_text, payload_text, payload)
             select $1, e.id, $2, e.number, $3, e.kind, e.author, e.element, e.check_id, e.digest, e.envelope, e.payload, e.payload::jsonb
               from unnest($4::uuid[], $5::int[], $6::text[], $7::uuid[], $8::uuid[], $9::text[], $10::text[], $11::text[], $12::text[]) as e(id, number, kind, author, element, check_id, digest, envelope, payload)`,
            [ORGANISATION, round.round, round.job, rows.map(row => row.envelope.id), rows.map(() => ++number), rows.map(row => row.envelope.kind), rows.map(row => row.envelope.author), rows.map(row => row.envelope.element), rows.map(row => row.envelope.check),
              rows.map(row => row.wire.envelope.length.toString(16).padStart(64, '0')), rows.map(row => row.wire.envelope), rows.map(row => row.wire.payload)])
          await admin.query('commit')
        }
        // As autovacuum would have by then; the last turn that is not measured.
        if (turn === WARM_UPS) await admin.query('analyze')
      },
    }, { rounds: ROUNDS, warmUps: WARM_UPS, beside: processorTimeOf(pids) })]
    const { rows } = await admin.query('select count(*)::int as n from entry')
    if (rows[0].n !== 2 * turns * ENTRIES) throw new Error(`${rows[0].n} entries are there`)
    const kept = await admin.query(`select count(*)::int as n from check_state where round_id = $1 and verdict <> 'notRead'`, [ours[0]!.round.round])
    if (kept.rows[0].n < 400) throw new Error(`${kept.rows[0].n} checks were folded`)
    return figures
  }
  finally {
    await app.end()
    await admin.end()
    await database.drop()
  }
}
