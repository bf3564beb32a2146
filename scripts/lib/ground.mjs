// The ground that everything stands on: packages, cluster, roles, schema, and the environment of web and worker.
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { claimDataFolder, releaseDataFolder } from './claim.mjs'
import { answeringPort, makeCluster, startCluster, stopCluster } from './cluster.mjs'
import { data, openDataFolder } from './dataFolder.mjs'
import { forRunning, installMissing } from './debianPackages.mjs'
import { installNodeModules } from './nodeModules.mjs'
import { freePort } from './ports.mjs'
import { keepSecrets, writeWhole } from './secrets.mjs'
import { step } from './steps.mjs'

export const databaseName = 'smoothside'
const portsFile = path.join(data.run, 'ports.json')
const logOf = name => path.join(data.logs, `${name}.log`)

/** A free port for each of our own services, the same as last time where it can be. @param {string} name */
async function keptPort(name) {
  const kept = fs.existsSync(portsFile) ? JSON.parse(fs.readFileSync(portsFile, 'utf8')) : {}
  const port = await freePort(kept[name])
  if (port !== kept[name]) rememberPort(name, port)
  return port
}
function rememberPort(name, port) {
  const kept = fs.existsSync(portsFile) ? JSON.parse(fs.readFileSync(portsFile, 'utf8')) : {}
  writeWhole(portsFile, JSON.stringify({ ...kept, [name]: port }))
}

/** Installs what the machine and the project lack. */
export async function installAll() {
  await step('Looking for PostgreSQL', () => installMissing(forRunning, logOf('packages')))
  await step('Looking at the packages of the project', () => installNodeModules(logOf('npm')))
}

/** Makes and starts the cluster of the data folder. @returns {Promise<{ port: number, admin: string, owner: string, app: string, made: boolean }>} */
export async function raiseCluster({ restoring = false } = {}) {
  openDataFolder({ restoring })
  const passwords = keepSecrets(data.databaseKeys, ['admin', 'owner', 'app'])
  const made = makeCluster(data.cluster, passwords.admin)
  const kept = fs.existsSync(portsFile) ? JSON.parse(fs.readFileSync(portsFile, 'utf8')).postgres : undefined
  const port = await startCluster(data.cluster, { port: kept })
  if (port !== kept) rememberPort('postgres', port)
  return { port, made, ...passwords }
}

/** Addresses of the database for the superuser, the owner and the app role. */
export async function databaseUrls(cluster) {
  const { appRole, databaseUrl, ownerRole } = await import('./migration.mjs')
  return {
    adminUrl: databaseUrl({ port: cluster.port, user: 'postgres', password: cluster.admin, database: 'postgres' }),
    ownerUrl: databaseUrl({ port: cluster.port, user: ownerRole, password: cluster.owner, database: databaseName }),
    appUrl: databaseUrl({ port: cluster.port, user: appRole, password: cluster.app, database: databaseName }),
  }
}

/** Roles, database, migrations, queues. @returns {Promise<string>} what was done, in words */
export async function migrateCluster(cluster) {
  const { makeDatabase, makeRoles, migrateDatabase } = await import('./migration.mjs')
  const { adminUrl, ownerUrl } = await databaseUrls(cluster)
  await makeRoles(adminUrl, cluster)
  await makeDatabase(adminUrl, databaseName)
  const count = await migrateDatabase(ownerUrl)
  return count ? `${count} new migration${count === 1 ? '' : 's'}` : 'nothing new'
}

/** Runs something against the data folder's database, starting the cluster for that time only if nothing else did. */
export async function withCluster(what, run) {
  if (fs.existsSync(data.cluster) && answeringPort(data.cluster) !== null) return run(await raiseCluster())
  openDataFolder()
  await claimDataFolder(what)
  try { return await run(await raiseCluster()) }
  finally {
    if (fs.existsSync(data.cluster)) stopCluster(data.cluster)
    releaseDataFolder()
  }
}

/** While the demo is loaded nobody else can write (web and worker do not run yet), so a half-loaded one is taken away with its database. */
async function dropHalfDemo(cluster) {
  if (!fs.existsSync(data.demoMark)) return
  await step('Taking away a demo that was broken off', async () => {
    const { dropDatabase } = await import('./migration.mjs')
    await dropDatabase((await databaseUrls(cluster)).adminUrl, databaseName)
    fs.rmSync(data.logHeads, { force: true }) // they tell of a log that is gone, and would hold all sealing
    fs.rmSync(data.demoMark)
  })
}

/**
 * All that start and dev share, up to a migrated database.
 * @param {number} webPort
 * @returns what web and worker are told by their environment; the owner's address is not among it
 */
export async function layGround(webPort) {
  await installAll()
  const cluster = await step('Starting the database', () => raiseCluster())
  await dropHalfDemo(cluster)
  await step('Bringing the database to the newest schema', () => migrateCluster(cluster))
  const { appUrl, ownerUrl } = await databaseUrls(cluster)
  const keys = keepSecrets(data.serverKeys, ['sessionPassword', 'secret'])
  const catcher = process.env.SMTP_URL ? null : { smtpPort: await keptPort('smtp'), pagePort: await keptPort('mailPage') }
  const inherited = Object.fromEntries(Object.entries(process.env).filter(([name]) => !/^(PG|DATABASE_URL|npm_)/.test(name)))
  const environment = {
    ...inherited,
    HOST: '127.0.0.1',
    PORT: String(webPort),
    SMOOTHSIDE_DATA: data.root,
    DATABASE_URL_APP: appUrl,
    NUXT_SESSION_PASSWORD: keys.sessionPassword,
    SMOOTHSIDE_SECRET: keys.secret,
    SMOOTHSIDE_ORIGIN: process.env.SMOOTHSIDE_ORIGIN ?? `http://127.0.0.1:${webPort}`,
    MAIL_FROM: process.env.MAIL_FROM ?? 'Smoothside <records@smoothside.example>',
    ...(catcher ? { SMTP_URL: `smtp://127.0.0.1:${catcher.smtpPort}`, MAIL_CATCHER_URL: `http://127.0.0.1:${catcher.pagePort}` } : {}),
  }
  return { cluster, ownerUrl, environment, catcher, workerPort: await keptPort('worker'), logOf }
}
