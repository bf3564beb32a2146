// npm start: from a fresh machine with Node.js 20 to a running Smoothside, saying what it does.
import './lib/nodeVersion.mjs'
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { buildIfChanged, serverEntry } from './lib/build.mjs'
import { data, openDataFolder, projectRoot } from './lib/dataFolder.mjs'
import { layGround } from './lib/ground.mjs'
import { claimDataFolder } from './lib/claim.mjs'
import { runProgram } from './lib/processes.mjs'
import { writeWhole } from './lib/secrets.mjs'
import { step } from './lib/steps.mjs'
import { assertPortFree, runServices, startMailCatcher, startService, waitUntilReady, watchDatabase, webPort } from './lib/services.mjs'

const demoLoader = path.join(projectRoot, 'scripts/demo.mjs')

/** Before web and worker run, so that a demo that is broken off leaves a database with nothing in it but itself (layGround then makes it anew). */
async function loadDemo({ ownerUrl, environment, logOf }) {
  if (process.env.SMOOTHSIDE_DEMO === 'no' || !fs.existsSync(demoLoader)) return
  const { withClient } = await import('./lib/migration.mjs')
  if (await withClient(ownerUrl, async client => (await client.query('select exists (select from organisation) as some')).rows[0].some)) return
  writeWhole(data.demoMark, '')
  await step('Loading the demo (once)', () => runProgram('Loading the demo', process.execPath, [demoLoader], { cwd: projectRoot, env: { ...environment, NODE_ENV: 'production' }, log: logOf('demo') }))
  fs.rmSync(data.demoMark)
}

function tellSignIns() {
  if (!fs.existsSync(data.demoSignIns)) return
  const signIns = JSON.parse(fs.readFileSync(data.demoSignIns, 'utf8'))
  console.log('\nDemo sign-ins:')
  for (const { email, password, role, name, organisation } of signIns)
    console.log(`  ${[email.padEnd(38), password.padEnd(22), [role, name, organisation].filter(Boolean).join(', ')].join(' ')}`.trimEnd())
}

await runServices(async () => {
  console.log('Starting Smoothside.')
  const port = webPort()
  await step('Opening the data folder', async () => {
    openDataFolder()
    const said = await claimDataFolder(`Smoothside runs at http://127.0.0.1:${port}`)
    await assertPortFree(port) // after the claim, which may have ended what a killed start left on that port
    return said
  })
  const ground = await layGround(port)
  const { cluster, environment, workerPort, logOf } = ground
  watchDatabase(cluster.port)
  await step('Building the server and the screens', () => buildIfChanged(logOf('build')))
  startMailCatcher(ground)
  await loadDemo(ground)
  await step('Starting worker and web', async () => {
    const built = role => ({ command: process.execPath, parameters: [serverEntry], cwd: projectRoot, log: logOf(role), env: { ...environment, NODE_ENV: 'production', SMOOTHSIDE_ROLE: role, ...(role === 'worker' ? { PORT: String(workerPort) } : {}) } })
    startService('worker', built('worker'))
    startService('web', built('web'))
    await waitUntilReady(`http://127.0.0.1:${port}`, logOf)
  })
  tellSignIns()
  console.log(`\nMail     ${environment.MAIL_CATCHER_URL ?? 'goes out by SMTP_URL'}\nData     ${data.root}\nLogs     ${data.logs}\nTo stop  Ctrl-C\n\nSmoothside is ready at http://127.0.0.1:${port}`)
})
