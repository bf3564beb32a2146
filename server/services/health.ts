import { entrance } from '../database/entrance'
import { usePool } from '../database/client'
import { useStorage as useFiles } from '../storage/storage'

/** Each thing that has to work, with whether it does; never a secret, never a text of an error. */
export async function readHealth(): Promise<{ ready: boolean, parts: Record<string, boolean>, oldestTaskSeconds: number | null }> {
  const part = (work: Promise<unknown>) => work.then(answer => answer !== false, () => false)
  let oldestTaskSeconds: number | null = null
  const parts = {
    database: await part(usePool().query('select 1')),
    schema: await part(usePool().query('select count(*) from drizzle.__drizzle_migrations')),
    storage: await part(useFiles().probe()),
    clock: await part(usePool().query<{ now: Date }>('select now()').then(({ rows }) => Math.abs(rows[0]!.now.getTime() - Date.now()) < 60_000)),
    worker: await part(entrance.installation().then(row => row.worker_seen_at !== null && Date.now() - row.worker_seen_at.getTime() < 90_000)),
    queue: await part(usePool().query<{ seconds: string | null }>(`select extract(epoch from now() - min(start_after)) as seconds from pgboss.job where state < 'active' and start_after < now()`)
      .then(({ rows }) => { oldestTaskSeconds = rows[0]?.seconds ? Math.round(Number(rows[0].seconds)) : null })),
  }
  return { ready: Object.values(parts).every(Boolean), parts, oldestTaskSeconds }
}
