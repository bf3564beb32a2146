// npm run migrate: brings a database to the newest schema. With DATABASE_URL_OWNER set, that one (its roles must be there); else the data folder's own.
import './lib/nodeVersion.mjs'
import process from 'node:process'
import { migrateCluster, withCluster } from './lib/ground.mjs'
import { runScript, step } from './lib/steps.mjs'

await runScript(() => step('Bringing the database to the newest schema', async () => {
  if (!process.env.DATABASE_URL_OWNER) return withCluster('its database is being migrated', migrateCluster)
  const { migrateDatabase } = await import('./lib/migration.mjs')
  return `${await migrateDatabase(process.env.DATABASE_URL_OWNER)} new migrations`
}))
