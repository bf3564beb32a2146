// Watches the shared test cluster and takes it away after five minutes without a session.
import fs from 'node:fs'
import process from 'node:process'
import { answeringPort, stopCluster } from './cluster.mjs'
import { withClient } from './migration.mjs'
import { idleSince, sharedCluster, sharedFolder, sharedUrl, touch, withSharedLock } from './testCluster.mjs'

const idleMilliseconds = 5 * 60_000
let lastBusy = Date.now()

async function sessions() {
  const port = answeringPort(sharedCluster)
  if (!port) return 0
  return withClient(sharedUrl(port), async client =>
    Number((await client.query(`select count(*) from pg_stat_activity where backend_type = 'client backend' and pid <> pg_backend_pid()`)).rows[0].count))
}

async function look() {
  await withSharedLock(async () => {
    if (!fs.existsSync(sharedFolder)) process.exit(0)
    touch('watched')
    if (await sessions().catch(() => 0)) lastBusy = Date.now()
    if (Date.now() - Math.max(lastBusy, idleSince()) < idleMilliseconds) return
    stopCluster(sharedCluster)
    fs.rmSync(sharedFolder, { recursive: true, force: true })
  })
}
setInterval(() => { void look() }, 15_000)
