import { spawn, type ChildProcess } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import { freePort } from '../../scripts/lib/ports.mjs'
import { cloneDatabase, type TestDatabase } from './postgres'

const root = path.resolve(import.meta.dirname, '../..')
/** Another build than the checkout's own, for a run beside others. */
const entry = process.env.TEST_BUILT_SERVER ?? path.join(root, '.output/server/index.mjs')

/** One message as the mail catcher keeps it. */
export interface CaughtMail {
  id: string
  received: string
  envelope: { from: string, to: string[] }
  from: string
  to: string
  subject: string
  text: string
  html: string | null
  attachments: { filename: string, contentType: string, size: number, checksum: string }[]
}

/** What outlives a server that is killed: database, files, mail. Several servers may stand on one. */
export interface ServerGround {
  database: TestDatabase
  dataFolder: string
  port: number
  /** Address of the mail catcher's page. */
  mailUrl: string
  /** What was caught so far, the newest first. */
  mails: () => Promise<CaughtMail[]>
  /** Waits for a message that fits. */
  mailThat: (fits: (mail: CaughtMail) => boolean) => Promise<CaughtMail>
  environment: Record<string, string>
  remove: () => Promise<void>
}

export interface RunningServer {
  baseURL: string
  ground: ServerGround
  /** Everything it wrote so far. */
  log: () => string
  /** SIGTERM, as an operator stops it. */
  stop: () => Promise<void>
  /** SIGKILL, as a machine loses it. */
  kill: () => Promise<void>
}

const pause = (milliseconds: number) => new Promise(resolve => setTimeout(resolve, milliseconds))

async function until<T>(what: string, look: () => Promise<T | undefined | false>, seconds = 30): Promise<T> {
  for (const end = Date.now() + seconds * 1000; Date.now() < end;) {
    const seen = await look()
    if (seen) return seen
    await pause(50)
  }
  throw new Error(`waited ${seconds} s in vain for ${what}`)
}

function spawnNode(parameters: string[], environment: Record<string, string>) {
  const child = spawn(process.execPath, parameters, { cwd: root, env: { PATH: process.env.PATH, TZ: 'UTC', ...environment }, stdio: ['ignore', 'pipe', 'pipe'] })
  let log = ''
  child.stdout.on('data', part => (log += part))
  child.stderr.on('data', part => (log += part))
  return { child, log: () => log }
}

async function end(child: ChildProcess, signal: 'SIGTERM' | 'SIGKILL') {
  if (child.exitCode !== null || child.signalCode !== null) return
  const gone = new Promise(resolve => child.once('exit', resolve))
  child.kill(signal)
  const late = setTimeout(() => child.kill('SIGKILL'), 10_000)
  await gone
  clearTimeout(late)
}

/** A database, a data folder and a mail catcher of their own. `unknown`: addresses whose mail the catcher returns. */
export async function layServerGround(more: { unknown?: string[], environment?: Record<string, string> } = {}): Promise<ServerGround> {
  const database = await cloneDatabase()
  const dataFolder = fs.mkdtempSync(path.join(os.tmpdir(), 'smoothside-data-'))
  const catcher = spawnNode([path.join(root, 'scripts/mailCatcher.mjs')], { MAIL_CATCHER_FOLDER: path.join(dataFolder, 'mail'), MAIL_CATCHER_UNKNOWN: (more.unknown ?? []).join(',') })
  const { mail: mailUrl, smtp } = await until('the mail catcher', async () => {
    if (catcher.child.exitCode !== null) throw new Error(`the mail catcher ended: ${catcher.log()}`)
    return catcher.log().includes('\n') && JSON.parse(catcher.log()) as { mail: string, smtp: number }
  })
  const port = await freePort()
  const mails = async () => (await (await fetch(`${mailUrl}/messages.json`)).json()) as CaughtMail[]
  return {
    database,
    dataFolder,
    port,
    mailUrl,
    mails,
    mailThat: fits => until('a mail', async () => (await mails()).find(fits)),
    environment: {
      NODE_ENV: 'production',
      HOST: '127.0.0.1',
      SMOOTHSIDE_DATA: dataFolder,
      DATABASE_URL_APP: database.appUrl,
      NUXT_SESSION_PASSWORD: randomBytes(32).toString('hex'),
      SMOOTHSIDE_SECRET: randomBytes(32).toString('hex'),
      SMOOTHSIDE_ORIGIN: `http://127.0.0.1:${port}`,
      SMTP_URL: `smtp://127.0.0.1:${smtp}`,
      MAIL_FROM: 'Smoothside <records@smoothside.example>',
      MAIL_CATCHER_URL: mailUrl,
      ...more.environment,
    },
    async remove() {
      await end(catcher.child, 'SIGTERM')
      await database.drop()
      fs.rmSync(dataFolder, { recursive: true, force: true })
    },
  }
}

/**
 * Starts the built server (`npm run build` first) and waits until it is ready. Without a ground it gets one, which goes with `stop`.
 * A worker beside a web: `startServer({ ground: web.ground, role: 'worker' })`. After `kill`, the same ground starts again at the same address.
 */
export async function startServer(options: { ground?: ServerGround, role?: 'web' | 'worker' | 'both', environment?: Record<string, string> } = {}): Promise<RunningServer> {
  if (!fs.existsSync(entry)) throw new Error('There is no built server. Run `npm run build` first.')
  const ground = options.ground ?? await layServerGround()
  const role = options.role ?? 'both'
  const port = role === 'worker' ? await freePort() : ground.port
  const baseURL = `http://127.0.0.1:${port}`
  const { child, log } = spawnNode([entry], { ...ground.environment, PORT: String(port), SMOOTHSIDE_ROLE: role, ...options.environment })
  const stop = async (signal: 'SIGTERM' | 'SIGKILL') => { await end(child, signal) }
  try {
    // a web alone is live before a worker's heartbeat makes it ready
    await until('the server', async () => {
      if (child.exitCode !== null) throw new Error(`the server ended (${child.exitCode}):\n${log()}`)
      return fetch(`${baseURL}/health/${role === 'both' ? 'ready' : 'live'}`).then(answer => answer.ok, () => false)
    })
  }
  catch (error) {
    await stop('SIGKILL')
    if (!options.ground) await ground.remove()
    throw error instanceof Error ? new Error(`${error.message}\n${log()}`) : error
  }
  return {
    baseURL,
    ground,
    log,
    kill: () => stop('SIGKILL'),
    async stop() {
      await stop('SIGTERM')
      if (!options.ground) await ground.remove()
    },
  }
}

/** Has the built server do one thing and end, as scripts/demo.mjs and scripts/refold.mjs do. */
export async function runOnce(ground: ServerGround, what: 'demo' | 'refold'): Promise<void> {
  const { child, log } = spawnNode([entry], { ...ground.environment, PORT: '0', SMOOTHSIDE_ROLE: 'web', SMOOTHSIDE_RUN: what })
  const code = await new Promise(resolve => child.once('exit', resolve))
  if (code !== 0) throw new Error(`the run "${what}" ended with ${String(code)}:\n${log()}`)
}
