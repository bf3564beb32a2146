import { entrance } from '../database/entrance'
import { refusePowerfulRole, usePool } from '../database/client'
import { logger } from '../logger'
import { useSettings } from '../settings'
import { stopQueue } from '../tasks/queue'
import { startWorker } from '../tasks/worker'

/** Checks all that the process needs before it answers, and starts the worker where this process is one. */
async function start(): Promise<void> {
  const { runsWorker } = useSettings()
  await refusePowerfulRole()
  await entrance.installation()
  if (runsWorker) await startWorker()
  logger.info('ready')
}

export default defineNitroPlugin((nitro) => {
  if (import.meta.prerender) return
  // Nitro does not wait for plugins: every request waits for this promise instead.
  const ready = start().catch((error: Error) => {
    console.error(`Smoothside cannot start: ${error.message}`)
    process.exit(1)
  })
  nitro.hooks.hook('request', () => ready)
  nitro.hooks.hook('close', async () => {
    await stopQueue()
    await usePool().end()
  })
})
