import pg from 'pg'
import { useSettings } from '../settings'
import { logger } from '../logger'

let pool: pg.Pool | undefined

/** The one pool of the process, as the app role, which owns nothing and sees nothing before it takes a standing. */
export function usePool(): pg.Pool {
  if (!pool) {
    pool = new pg.Pool({ connectionString: useSettings().databaseUrl, max: 10, connectionTimeoutMillis: 10_000 })
    pool.on('error', error => logger.warn({ code: (error as { code?: string }).code }, 'an idle database connection ended'))
  }
  return pool
}

/** For tests and benches that bring a database of their own. */
export function setPool(own: pg.Pool): void {
  pool = own
}

/** Refuses to run with a role that could look past row-level security. */
export async function refusePowerfulRole(): Promise<void> {
  const { rows } = await usePool().query<{ powerful: boolean, owns: boolean }>(`
    select rolsuper or rolbypassrls or rolcreaterole or rolcreatedb as powerful,
           exists (select 1 from pg_class c where c.relowner = r.oid and c.relkind = 'r') as owns
      from pg_roles r where rolname = current_user`)
  if (rows[0]?.powerful || rows[0]?.owns) throw new Error('The database role of DATABASE_URL_APP is too powerful: it must not be a superuser, bypass row-level security or own tables. Use the role smoothside_app.')
}
