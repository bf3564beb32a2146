// npm run restore -- <backup folder>: makes a data folder from a backup. Never over an existing one.
import './lib/nodeVersion.mjs'
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { copyFile, readBackup } from './lib/backupFiles.mjs'
import { claimDataFolder, releaseDataFolder } from './lib/claim.mjs'
import { runClient, stopCluster } from './lib/cluster.mjs'
import { data, openDataFolder } from './lib/dataFolder.mjs'
import { databaseName, databaseUrls, installAll, migrateCluster, raiseCluster } from './lib/ground.mjs'
import { runScript, step, Trouble } from './lib/steps.mjs'

/** Devices see another epoch and offer again what they hold, so that what came in after the backup is not lost. */
async function beginNewEpoch(cluster) {
  const { withClient } = await import('./lib/migration.mjs')
  const { ownerUrl } = await databaseUrls(cluster)
  await withClient(ownerUrl, async (client) => {
    const { rowCount } = await client.query('update installation set store_epoch = gen_random_uuid()')
    if (rowCount !== 1) throw new Trouble('The restored database does not say which installation it is, so devices could not be told to offer their entries again. Use another backup.')
  })
}

async function fillDatabase(backup, cluster) {
  const { makeDatabase, makeRoles } = await import('./lib/migration.mjs')
  const { adminUrl } = await databaseUrls(cluster)
  await makeRoles(adminUrl, cluster)
  await makeDatabase(adminUrl, databaseName)
  runClient(data.cluster, 'pg_restore', ['--exit-on-error', '--single-transaction', path.join(backup, 'database.dump')], { port: cluster.port, password: cluster.admin, database: databaseName })
}

await runScript(async () => {
  if (!process.argv[2]) throw new Trouble('Name the backup: npm run restore -- <folder that npm run backup made>. SMOOTHSIDE_DATA names the data folder to fill; it has to be new or empty.')
  const backup = path.resolve(process.env.INIT_CWD ?? process.cwd(), process.argv[2])
  if (fs.existsSync(data.root) && fs.readdirSync(data.root).length) throw new Trouble(`${data.root} is not empty, and a restore writes over nothing. Set SMOOTHSIDE_DATA to a new folder, or move this one away first.`)
  const manifest = await step('Checking every digest of the backup', () => readBackup(backup))
  openDataFolder({ restoring: true })
  await claimDataFolder('a backup is being restored into it')
  fs.writeFileSync(data.restoreMark, '')
  try {
    await installAll()
    await step('Copying files, keys and log heads', async () => {
      for (const { file } of manifest.files.filter(({ file }) => file.startsWith('data/'))) await copyFile(path.join(backup, file), path.join(data.root, file.slice('data/'.length)))
    })
    const cluster = await step('Making a database', () => raiseCluster({ restoring: true }))
    await step('Filling the database', () => fillDatabase(backup, cluster))
    await step('Bringing it to the newest schema', () => migrateCluster(cluster))
    await step('Beginning a new epoch, so that devices offer again what they hold', () => beginNewEpoch(cluster))
    fs.rmSync(data.restoreMark)
  }
  finally {
    if (fs.existsSync(data.cluster)) stopCluster(data.cluster)
    releaseDataFolder()
  }
  console.log(`\nRestored into ${data.root} from the backup of ${manifest.made}. Start it: npm start`)
})
