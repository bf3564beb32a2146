// npm run dev: the same ground as npm start, then Nuxt's development server with the worker inside.
import './lib/nodeVersion.mjs'
import process from 'node:process'
import { nuxtProgram } from './lib/build.mjs'
import { claimDataFolder } from './lib/claim.mjs'
import { openDataFolder, projectRoot } from './lib/dataFolder.mjs'
import { layGround } from './lib/ground.mjs'
import { assertPortFree, runServices, startMailCatcher, startService, watchDatabase, webPort } from './lib/services.mjs'
import { say, step } from './lib/steps.mjs'

await runServices(async () => {
  const port = webPort()
  await step('Opening the data folder', async () => {
    openDataFolder()
    const said = await claimDataFolder(`the development server runs at http://127.0.0.1:${port}`)
    await assertPortFree(port) // after the claim, which may have ended what a killed start left on that port
    return said
  })
  const ground = await layGround(port)
  watchDatabase(ground.cluster.port)
  startMailCatcher(ground)
  if (ground.environment.MAIL_CATCHER_URL) say(`Mail goes to ${ground.environment.MAIL_CATCHER_URL}`)
  startService('nuxt', { command: process.execPath, parameters: [nuxtProgram, 'dev', '--host', '127.0.0.1', '--port', String(port)], cwd: projectRoot, env: { ...ground.environment, SMOOTHSIDE_ROLE: 'both' } })
})
