// PostgreSQL for tests: quick and forgetful, in a temporary folder.
import { spawn } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import process from 'node:process'
import { makeCluster, startCluster, stopCluster } from './cluster.mjs'
import { databaseUrl } from './migration.mjs'
import { keepSecrets } from './secrets.mjs'

const settings = ['max_connections=200', 'shared_buffers=128MB']
const adminUrl = (port, password) => databaseUrl({ port, user: 'postgres', password, database: 'postgres' })

/** A cluster for this process alone. @returns {Promise<{ url: string, stop: () => void }>} */
export async function startOwnTestCluster() {
  const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'smoothside-test-'))
  fs.chmodSync(folder, 0o711) // the database user must be able to pass through
  const password = randomBytes(16).toString('hex')
  const cluster = path.join(folder, 'postgres')
  makeCluster(cluster, password, { durable: false })
  const port = await startCluster(cluster, { durable: false, settings })
  return {
    url: adminUrl(port, password),
    stop() {
      stopCluster(cluster)
      fs.rmSync(folder, { recursive: true, force: true })
    },
  }
}

export const sharedFolder = path.join(os.tmpdir(), `smoothside-test-shared-${process.getuid?.() ?? 0}`)
export const sharedCluster = path.join(sharedFolder, 'postgres')
const touched = name => fs.statSync(path.join(sharedFolder, name), { throwIfNoEntry: false })?.mtimeMs ?? 0
/** Marks "used" or "watched" now. @param {'used' | 'watched'} name */
export const touch = name => fs.writeFileSync(path.join(sharedFolder, name), '')

/** One process at a time; a lock that its holder left behind counts for two minutes. */
export async function withSharedLock(run) {
  const lock = `${sharedFolder}.lock`
  for (;;) {
    try {
      fs.mkdirSync(lock)
      break
    }
    catch (error) {
      if (error.code !== 'EEXIST') throw error
      const since = fs.statSync(lock, { throwIfNoEntry: false })?.mtimeMs
      if (since && Date.now() - since > 120_000) fs.rmdirSync(lock)
      await new Promise(resolve => setTimeout(resolve, 50))
    }
  }
  try { return await run() }
  finally { fs.rmSync(lock, { recursive: true, force: true }) }
}

export const idleSince = () => touched('used')
export const sharedUrl = port => adminUrl(port, keepSecrets(path.join(sharedFolder, 'password.json'), ['admin']).admin)

/** The cluster that single test runs by hand share; it ends by itself when nobody has used it for a while (idleTestCluster.mjs). @returns {Promise<string>} */
export async function sharedTestCluster() {
  return withSharedLock(async () => {
    fs.mkdirSync(sharedFolder, { recursive: true, mode: 0o711 })
    const { admin } = keepSecrets(path.join(sharedFolder, 'password.json'), ['admin'])
    makeCluster(sharedCluster, admin, { durable: false })
    const port = await startCluster(sharedCluster, { durable: false, settings })
    if (Date.now() - touched('watched') > 45_000) spawn(process.execPath, [path.join(import.meta.dirname, 'idleTestCluster.mjs')], { detached: true, stdio: 'ignore' }).unref()
    touch('used')
    touch('watched') // until the watcher's own first mark
    return adminUrl(port, admin)
  })
}
