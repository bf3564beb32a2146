// npm run backup [-- folder]: database, files, log heads and keys in one folder with a list of digests. May run while Smoothside does.
import './lib/nodeVersion.mjs'
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { copyFile, digestOf, filesBelow } from './lib/backupFiles.mjs'
import { runClient } from './lib/cluster.mjs'
import { data, notInBackup } from './lib/dataFolder.mjs'
import { databaseName, withCluster } from './lib/ground.mjs'
import { writeWhole } from './lib/secrets.mjs'
import { runScript, say, step, Trouble } from './lib/steps.mjs'

await runScript(async () => {
  if (!fs.existsSync(data.cluster)) throw new Trouble(`There is no database in ${data.root}, so there is nothing to back up. SMOOTHSIDE_DATA names the data folder.`)
  const parent = path.resolve(process.env.INIT_CWD ?? process.cwd(), process.argv[2] ?? data.backups)
  fs.mkdirSync(parent, { recursive: true, mode: 0o700 })
  const name = `smoothside-${new Date().toISOString().replace(/\.\d+Z$/, 'Z').replace(/[:-]/g, '')}`
  const making = path.join(parent, `${name}.unfinished`)
  fs.mkdirSync(making, { mode: 0o700 })
  const copyAll = async (places) => {
    for (const place of places) await copyFile(path.join(data.root, place), path.join(making, 'data', place))
    return `${places.length} files`
  }
  // In this order: log heads before the database, so that it is never behind them; files after it, so that every file it names is there.
  const places = () => filesBelow(data.root, notInBackup)
  await step('Copying keys and log heads', () => copyAll(places().filter(place => !place.startsWith('files/'))))
  await step('Dumping the database', () => withCluster('its backup is being made', async (cluster) => {
    runClient(data.cluster, 'pg_dump', ['--format=custom', `--file=${path.join(making, 'database.dump')}`], { port: cluster.port, password: cluster.admin, database: databaseName })
    fs.chmodSync(path.join(making, 'database.dump'), 0o600)
  }))
  await step('Copying files', () => copyAll(places().filter(place => place.startsWith('files/'))))
  if (process.env.S3_ENDPOINT) say('Photos and records lie in the S3 bucket, not in this backup: back it up by its own means.')
  await step('Writing the manifest', async () => {
    const files = []
    for (const file of filesBelow(making)) files.push({ file, bytes: fs.statSync(path.join(making, file)).size, sha256: await digestOf(path.join(making, file)) })
    writeWhole(path.join(making, 'manifest.json'), `${JSON.stringify({ format: 1, made: new Date().toISOString(), files }, null, 2)}\n`)
    fs.renameSync(making, path.join(parent, name))
  })
  console.log(`\nThe backup is ${path.join(parent, name)}\nIt holds the keys that sign records: keep it where only you can read it, and not on this disk alone.`)
})
