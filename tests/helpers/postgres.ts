import { createHash, randomBytes } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import { appRole, databaseUrl, makeDatabase, makeRoles, migrateDatabase, migrationsFolder, ownerRole, withClient } from '../../scripts/lib/migration.mjs'
import { sharedTestCluster } from '../../scripts/lib/testCluster.mjs'

/** A database of its own for one test file, migrated, empty of rows but those that migrations put there. */
export interface TestDatabase {
  name: string
  /** Superuser: sees and does everything. For looking, not for testing what may be done. */
  adminUrl: string
  /** Owns schema and functions; bound by its own policies. */
  ownerUrl: string
  /** What web and worker get. */
  appUrl: string
  drop: () => Promise<void>
}

const root = path.resolve(import.meta.dirname, '../..')
const passwords = { owner: 'owner-of-a-test', app: 'app-of-a-test' }
const lock = 4711002

let admin: Promise<string> | undefined
/** Given by `npm test`; a run by hand shares a cluster that ends by itself. */
const adminUrl = () => (admin ??= process.env.TEST_PG_URL ? Promise.resolve(process.env.TEST_PG_URL) : sharedTestCluster())

/** Everything that decides how a migrated database looks, so that a changed migration makes a new template. */
function schemaDigest(): string {
  const hash = createHash('sha256')
  const files = fs.readdirSync(migrationsFolder, { recursive: true, encoding: 'utf8' }).sort().map(name => path.join(migrationsFolder, name))
  for (const file of [...files, path.join(root, 'server/tasks/queues.json'), path.join(root, 'scripts/lib/migration.mjs')])
    if (fs.statSync(file).isFile()) hash.update(fs.readFileSync(file))
  return hash.digest('hex').slice(0, 16)
}

function urlsOf(admin: string, name: string) {
  const port = Number(new URL(admin).port)
  const adminOfName = new URL(admin)
  adminOfName.pathname = `/${name}`
  return {
    adminUrl: adminOfName.href,
    ownerUrl: databaseUrl({ port, user: ownerRole, password: passwords.owner, database: name }),
    appUrl: databaseUrl({ port, user: appRole, password: passwords.app, database: name }),
  }
}

/** The migrated database that all are copied from; whoever comes first makes it, the others wait. */
async function template(admin: string): Promise<string> {
  const name = `smoothside_template_${schemaDigest()}`
  await withClient(admin, async (client) => {
    await client.query(`select pg_advisory_lock(${lock})`)
    if ((await client.query('select from pg_database where datname = $1', [name])).rowCount) return
    const making = `${name}_making`
    await client.query(`drop database if exists ${making} with (force)`)
    await makeRoles(admin, passwords)
    await makeDatabase(admin, making)
    await migrateDatabase(urlsOf(admin, making).ownerUrl)
    await client.query(`select pg_terminate_backend(pid) from pg_stat_activity where datname = '${making}'`)
    await client.query(`alter database ${making} allow_connections false`)
    await client.query(`alter database ${making} rename to ${name}`)
  })
  return name
}
let templateName: Promise<string> | undefined

/** A fresh database. Drop it in afterAll. */
export async function cloneDatabase(): Promise<TestDatabase> {
  const admin = await adminUrl()
  const from = await (templateName ??= template(admin))
  const name = `test_${randomBytes(8).toString('hex')}`
  await withClient(admin, async client => client.query(`create database ${name} template ${from} owner ${ownerRole}`))
  await makeDatabase(admin, name)
  return {
    name,
    ...urlsOf(admin, name),
    drop: async () => { await withClient(admin, async client => client.query(`drop database if exists ${name} with (force)`)) },
  }
}
