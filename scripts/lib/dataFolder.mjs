// The folder that holds everything an installation must keep, and what lies where in it.
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { Trouble } from './steps.mjs'

export const projectRoot = path.resolve(import.meta.dirname, '../..')
/** npm changes into the project; a relative path is meant from where the reader typed it. */
const from = process.env.INIT_CWD ?? process.cwd()
const root = process.env.SMOOTHSIDE_DATA ? path.resolve(from, process.env.SMOOTHSIDE_DATA) : path.join(projectRoot, '.data')

export const data = {
  root,
  /** PostgreSQL's own folder. */
  cluster: path.join(root, 'postgres'),
  /** Passwords of the database's roles: they belong to the cluster and are made anew by a restore. */
  databaseKeys: path.join(root, 'keys/database.json'),
  /** What seals session cookies and wraps signing keys: lost with it are all signing keys. */
  serverKeys: path.join(root, 'keys/server.json'),
  mail: path.join(root, 'mail'),
  logs: path.join(root, 'logs'),
  /** What runs now, and which ports were taken last time. */
  run: path.join(root, 'run'),
  backups: path.join(root, 'backups'),
  /** Stands from the first to the last moment of a restore. */
  restoreMark: path.join(root, 'run/restore-unfinished'),
  /** Stands while the demo is loaded into an empty database. */
  demoMark: path.join(root, 'run/demo-unfinished'),
  /** Signed heads of the log, kept outside the database (server/services/log/writeHead.ts). */
  logHeads: path.join(root, 'log-heads.jsonl'),
  demoSignIns: path.join(root, 'demo-sign-ins.json'),
}
/** What a backup leaves out of the data folder: the database goes in as a dump, the rest is of this machine and day. */
export const notInBackup = ['postgres', 'postgres.making', 'mail', 'logs', 'run', 'backups', 'keys/database.json']

/** Refuses to go on with less than this much room on the disk that holds `folder`. */
export function assertRoom(folder, megabytes, forWhat) {
  const { bavail, bsize } = fs.statfsSync(folder)
  const free = Math.floor(bavail * bsize / 1e6)
  if (free < megabytes)
    throw new Trouble(`The disk that holds ${folder} is full or nearly so: ${free} MB are free and ${forWhat} needs ${megabytes} MB. Free some space there${folder === root ? ', or set SMOOTHSIDE_DATA to a folder on another disk,' : ''} and start again.`)
}

/** Makes the data folder if need be and makes sure that this user may write in it, that there is room, and that no restore was broken off in it. */
export function openDataFolder({ restoring = false } = {}) {
  try {
    // root's database runs as another user, who must pass through; an ordinary user's data is nobody else's
    if (!fs.existsSync(root)) fs.mkdirSync(root, { recursive: true, mode: process.getuid?.() === 0 ? 0o711 : 0o700 })
    if (!fs.statSync(root).isDirectory()) throw new Trouble(`${root} is a file, not a folder. Set SMOOTHSIDE_DATA to a folder.`)
    fs.accessSync(root, fs.constants.R_OK | fs.constants.W_OK | fs.constants.X_OK)
    for (const folder of [data.run, data.logs, path.dirname(data.serverKeys)]) {
      fs.mkdirSync(folder, { recursive: true, mode: 0o700 })
      fs.accessSync(folder, fs.constants.R_OK | fs.constants.W_OK | fs.constants.X_OK)
    }
  }
  catch (error) {
    if (['EACCES', 'EPERM'].includes(error.code))
      throw new Trouble(`This user may not write in the data folder ${root}${error.path && error.path !== root ? ` (${error.path})` : ''}. Start as the user who owns it, or set SMOOTHSIDE_DATA to a folder of your own.`)
    if (error.code === 'ENOTDIR') throw new Trouble(`${root} cannot be a folder, because a part of that path is a file. Set SMOOTHSIDE_DATA to another folder.`)
    // Node says ENOENT when a disk that may not be written refuses a new folder
    if (['EROFS', 'ENOENT'].includes(error.code)) throw new Trouble(`The data folder ${root} cannot be made or written: its disk takes no changes. Set SMOOTHSIDE_DATA to a folder on another disk.`)
    throw error
  }
  if (!restoring && fs.existsSync(data.restoreMark)) throw new Trouble(`A restore into ${root} was broken off, so what lies there is not whole. Remove that folder and restore again.`)
  assertRoom(root, 200, 'the database')
}
