// The frame of start and dev: what runs for long, how it is watched, and how all of it ends.
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { holdsDataFolder, releaseDataFolder } from './claim.mjs'
import { answeringPort, startCluster, stopCluster } from './cluster.mjs'
import { data, projectRoot } from './dataFolder.mjs'
import { freePort, portIsFree } from './ports.mjs'
import { endAll, keepRunning, lastLines, startProgram } from './processes.mjs'
import { explain, runScript, Trouble } from './steps.mjs'

let stopping = false
let watch
/** Ends everything that this start began, the database last. */
async function stopAll({ patience = 10_000 } = {}) {
  stopping = true
  clearInterval(watch)
  await endAll(patience)
  if (!holdsDataFolder()) return
  try { if (fs.existsSync(data.cluster)) stopCluster(data.cluster) }
  finally { releaseDataFolder() }
}

async function stopBecause(sentence, code) {
  if (stopping) return
  console.error(`\n${sentence}`)
  await stopAll().catch(error => console.error(explain(error) ?? error))
  console.log('Stopped. The data is kept.')
  process.exit(code)
}

/** Runs the start; Ctrl-C, SIGTERM, a closed terminal or a vanished npm end what it started. */
export async function runServices(main) {
  for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'])
    process.on(signal, () => {
      if (stopping) void stopAll({ patience: 0 }).finally(() => process.exit(1))
      else void stopBecause('Stopping ...', 0)
    })
  const parent = process.ppid
  const orphaned = setInterval(() => { if (process.env.npm_lifecycle_event && process.ppid !== parent) void stopBecause('The npm that started this is gone; stopping ...', 0) }, 1000)
  orphaned.unref()
  await runScript(main, async (tell) => {
    if (stopping) return // the signal's own way ends the process; what failed, failed because of it
    tell()
    await stopAll().catch(error => console.error(explain(error) ?? error))
    process.exit(1)
  })
}

/** The port of the web, from PORT or 4600. */
export function webPort() {
  const port = Number(process.env.PORT || 4600)
  if (!Number.isInteger(port) || port < 1 || port > 65_535) throw new Trouble(`PORT is "${process.env.PORT}", which is no port. Give a number from 1024 to 65535, for example: PORT=4600 npm start`)
  return port
}

/** Says so when another program has the port. */
export async function assertPortFree(port) {
  const free = await portIsFree(port).catch((error) => {
    if (error.code === 'EACCES') throw new Trouble(`This user may not use port ${port}. Take a port from 1024 up, for example: PORT=4600 npm start`)
    throw error
  })
  if (!free) throw new Trouble(`Port ${port} is in use by another program. Stop that one, or take another port: PORT=${await freePort(port + 1)} npm start`)
}

/** Starts one of our services and keeps it running. */
export function startService(name, { command, parameters, ...options }) {
  if (options.log && (fs.statSync(options.log, { throwIfNoEntry: false })?.size ?? 0) > 10e6) fs.renameSync(options.log, `${options.log}.1`)
  keepRunning(name, () => startProgram(name, command, parameters, options), () => void stopBecause(`${name} ends again and again.${options.log ? ` The end of ${options.log}:\n${lastLines(options.log)}` : ''}`, 1))
}

/** Mail goes to the catcher unless the environment names a mail server. */
export function startMailCatcher({ catcher, logOf, environment }) {
  if (!catcher) return
  startService('mail catcher', {
    command: process.execPath,
    parameters: [path.join(projectRoot, 'scripts/mailCatcher.mjs')],
    cwd: projectRoot,
    log: logOf('mail'),
    env: { ...environment, MAIL_CATCHER_FOLDER: data.mail, MAIL_CATCHER_SMTP_PORT: String(catcher.smtpPort), MAIL_CATCHER_PORT: String(catcher.pagePort) },
  })
}

/** Raises the database again when it was killed. @param {number} port */
export function watchDatabase(port) {
  let raising = false
  watch = setInterval(() => {
    if (stopping || raising || answeringPort(data.cluster) === port) return
    raising = true
    console.error('  the database ended unexpectedly and is started again')
    startCluster(data.cluster, { port }).then(
      (now) => { if (now !== port) void stopBecause('The database could not get its port back.', 1) },
      error => void stopBecause(`The database does not start again: ${explain(error) ?? error.message}`, 1),
    ).finally(() => { raising = false })
  }, 2000)
}

/** Waits until the web says that all it needs is there. */
export async function waitUntilReady(origin, logOf) {
  let last = 'no answer'
  for (const end = Date.now() + 60_000; Date.now() < end && !stopping;) {
    try {
      const answer = await fetch(`${origin}/health/ready`, { signal: AbortSignal.timeout(5000) })
      if (answer.ok) return
      last = `${answer.status} ${(await answer.text()).slice(0, 600)}`
    }
    catch (error) { last = error.cause?.code ?? error.message }
    await new Promise(resolve => setTimeout(resolve, 150))
  }
  throw new Trouble(`The server did not get ready within a minute. Its last answer: ${last}\nThe end of ${logOf('web')}:\n${lastLines(logOf('web'))}\nThe end of ${logOf('worker')}:\n${lastLines(logOf('worker'))}`)
}
