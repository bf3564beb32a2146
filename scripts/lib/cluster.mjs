// A PostgreSQL cluster of our own: on loopback, with passwords from its first second, run by an ordinary user.
import { execFileSync, spawnSync } from 'node:child_process'
import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import process from 'node:process'
import { freePort } from './ports.mjs'
import { Trouble } from './steps.mjs'

const oldest = 15
const programs = ['initdb', 'pg_ctl', 'postgres', 'pg_isready']

/** Folders that may hold PostgreSQL's programs, Debian's version 15 first, then newer ones. */
function candidateFolders() {
  const folders = process.env.PG_BIN_DIR ? [process.env.PG_BIN_DIR] : []
  try {
    const versions = fs.readdirSync('/usr/lib/postgresql').map(Number).filter(version => version >= oldest)
    folders.push(...versions.sort((a, b) => a - b).map(version => `/usr/lib/postgresql/${version}/bin`))
  }
  catch { /* not Debian's layout */ }
  return [...folders, ...(process.env.PATH ?? '').split(':').filter(Boolean)]
}
const versionOf = folder => execFileSync(path.join(folder, 'postgres'), ['--version'], { encoding: 'utf8' }).match(/(\d+)/)?.[1]

const found = new Map()
/** The folder of PostgreSQL's programs, of the wanted major version if one is given; null when there is none. */
export function findPostgres(version) {
  if (!found.has(version)) {
    const folder = candidateFolders()
      .filter(folder => programs.every(program => fs.existsSync(path.join(folder, program))))
      .find(folder => version === undefined ? Number(versionOf(folder)) >= oldest : versionOf(folder) === version)
    if (!folder) return null // may be installed in a moment: not remembered
    found.set(version, folder)
  }
  return found.get(version)
}

/** PostgreSQL refuses to run as root, so root runs it as the user that Debian's package makes. Null: run as who we are. */
export function databaseUser() {
  if (process.getuid?.() !== 0) return null
  try {
    const [uid, gid] = ['-u', '-g'].map(flag => Number(execFileSync('id', [flag, 'postgres'], { encoding: 'utf8', stdio: ['ignore', 'pipe', 'ignore'] })))
    return { uid, gid }
  }
  catch { throw new Trouble('PostgreSQL refuses to run as root and there is no user "postgres" to run it as. Start as an ordinary user, or install Debian\'s postgresql-15, which makes that user.') }
}

const run = (folder, program, parameters, more = {}) => {
  const bin = findPostgres(fs.existsSync(path.join(folder, 'PG_VERSION')) ? fs.readFileSync(path.join(folder, 'PG_VERSION'), 'utf8').trim() : undefined)
  if (!bin) throw new Trouble(`The database in ${folder} was made by another version of PostgreSQL than the one installed. Install that version, or set SMOOTHSIDE_DATA to a new folder.`)
  return spawnSync(path.join(bin, program), parameters, { encoding: 'utf8', cwd: '/', ...databaseUser(), env: { PATH: process.env.PATH, HOME: '/', LC_ALL: 'C.UTF-8' }, ...more })
}

function failed(what, output) {
  if (/No space left on device/i.test(output)) throw Object.assign(new Error('No space left on device'), { code: 'ENOSPC' })
  throw new Trouble(`PostgreSQL could not ${what}. It said:\n${output.trim().split('\n').slice(-12).join('\n')}`)
}

/** Every folder above must let the database user through; else says which one does not. */
function assertReachable(folder) {
  const user = databaseUser()
  if (!user || spawnSync('ls', [folder], { ...user, cwd: '/' }).status === 0) return
  const closed = []
  for (let above = path.dirname(folder); above !== path.dirname(above); above = path.dirname(above))
    if (!(fs.statSync(above).mode & 1)) closed.push(above)
  throw new Trouble(`The user "postgres", who runs the database, cannot enter ${closed.join(' and ') || folder}. Start as an ordinary user, or set SMOOTHSIDE_DATA to a folder that everyone can pass through (for example /var/lib/smoothside), or allow it: chmod o+x ${closed.join(' ')}`)
}

function makeFolder(folder) {
  const user = databaseUser()
  fs.mkdirSync(folder, { mode: 0o700 })
  if (user) fs.chownSync(folder, user.uid, user.gid)
  assertReachable(folder)
}

/**
 * Makes the cluster where there is none. It grows under another name and is renamed when whole, so a start that was broken off leaves nothing half made.
 * @param {string} folder
 * @param {string} password of the superuser "postgres"
 * @param {{ durable?: boolean }} [options] durable false: for tests, whose data may be lost
 * @returns {boolean} true when it was made now
 */
export function makeCluster(folder, password, { durable = true } = {}) {
  if (fs.existsSync(folder)) {
    assertReachable(folder)
    return false
  }
  const making = `${folder}.making`
  fs.rmSync(making, { recursive: true, force: true })
  makeFolder(making)
  const passwordFile = path.join(os.tmpdir(), `smoothside-${randomBytes(12).toString('hex')}`)
  try {
    fs.writeFileSync(passwordFile, `${password}\n`, { mode: 0o600, flag: 'wx' })
    const user = databaseUser()
    if (user) fs.chownSync(passwordFile, user.uid, user.gid)
    const made = run(making, 'initdb', ['-D', making, '-U', 'postgres', '--auth=scram-sha-256', `--pwfile=${passwordFile}`, '--encoding=UTF8', '--locale=C.UTF-8', ...(durable ? [] : ['--no-sync'])])
    if (made.status !== 0) failed('make its data folder', `${made.stdout}${made.stderr}`)
  }
  finally { fs.rmSync(passwordFile, { force: true }) }
  fs.renameSync(making, folder)
  return true
}

/** Process number and port that the cluster's server wrote when it started; null when it does not run. */
function serverMark(folder) {
  try {
    const lines = fs.readFileSync(path.join(folder, 'postmaster.pid'), 'utf8').split('\n')
    return { pid: Number(lines[0]), port: Number(lines[3]) }
  }
  catch (error) {
    if (error.code === 'ENOENT') return null
    throw error
  }
}

/** The port on which the cluster answers now, or null. `pg_ctl status` only looks at the process number, so the server itself is asked. */
export function answeringPort(folder) {
  const mark = serverMark(folder)
  return mark?.port && run(folder, 'pg_isready', ['-q', '-h', '127.0.0.1', '-p', String(mark.port)]).status === 0 ? mark.port : null
}

/**
 * Starts the cluster unless it answers already.
 * @param {string} folder
 * @param {{ port?: number, durable?: boolean, settings?: string[] }} [options] port: the wished one, another is taken when it is in use
 * @returns {Promise<number>} its port
 */
export async function startCluster(folder, { port: wished, durable = true, settings = [] } = {}) {
  // a server that is still recovering or shutting down has its mark there and does not answer yet
  for (let wait = 0; wait < 40 && !answeringPort(folder) && run(folder, 'pg_ctl', ['-D', folder, 'status']).status === 0; wait++)
    await new Promise(resolve => setTimeout(resolve, 250))
  const answering = answeringPort(folder)
  if (answering) return answering
  const port = await freePort(wished)
  const log = path.join(folder, 'server.log')
  const all = ['listen_addresses=127.0.0.1', `unix_socket_directories=''`, ...(durable ? [] : ['fsync=off', 'synchronous_commit=off', 'full_page_writes=off']), ...settings]
  const started = run(folder, 'pg_ctl', ['-D', folder, '-l', log, '-w', '-t', '60', '-o', `-p ${port} ${all.map(setting => `-c ${setting}`).join(' ')}`, 'start'], { stdio: 'ignore' })
  if (started.status !== 0) failed('start', fs.existsSync(log) ? fs.readFileSync(log, 'utf8') : 'nothing')
  return port
}

/** Stops the cluster if it runs; open sessions are rolled back. @param {string} folder */
export function stopCluster(folder) {
  if (!serverMark(folder)) return
  const stopped = run(folder, 'pg_ctl', ['-D', folder, '-m', 'fast', '-w', '-t', '30', 'stop'])
  if (stopped.status !== 0 && answeringPort(folder)) failed('stop', `${stopped.stdout}${stopped.stderr}`)
}

/** Runs one of PostgreSQL's client programs (pg_dump, pg_restore) as who we are; the password goes by the environment, never the command line. */
export function runClient(folder, program, parameters, { port, password, database }) {
  const result = run(folder, program, ['-h', '127.0.0.1', '-p', String(port), '-U', 'postgres', '-d', database, ...parameters],
    { uid: process.getuid?.(), gid: process.getgid?.(), env: { PATH: process.env.PATH, PGPASSWORD: password, LC_ALL: 'C.UTF-8' } })
  if (result.status !== 0) failed(`run ${program}`, `${result.stdout}${result.stderr}`)
}
