// The files of a backup: copying, digests, and the list of both.
import { createHash } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import { pipeline } from 'node:stream/promises'
import { Trouble } from './steps.mjs'

/** SHA-256 of a file, read in pieces: records and photos can be large. @param {string} file @returns {Promise<string>} */
export async function digestOf(file) {
  const hash = createHash('sha256')
  await pipeline(fs.createReadStream(file), hash)
  return hash.digest('hex')
}

/** Every file below a folder as a relative path, sorted; `leaveOut` names files or folders to pass by, unfinished writes are none. */
export function filesBelow(folder, leaveOut = [], below = '') {
  return fs.readdirSync(path.join(folder, below), { withFileTypes: true }).sort((a, b) => (a.name < b.name ? -1 : 1)).flatMap((entry) => {
    const place = below ? `${below}/${entry.name}` : entry.name
    if (leaveOut.includes(place) || /\.(part|unfinished)$/.test(entry.name)) return []
    if (entry.isDirectory()) return filesBelow(folder, leaveOut, place)
    return entry.isFile() ? [place] : []
  })
}

/** Copies one file whole, to be read by its owner only. */
export async function copyFile(from, to) {
  fs.mkdirSync(path.dirname(to), { recursive: true, mode: 0o700 })
  await fs.promises.copyFile(from, to, fs.constants.COPYFILE_EXCL | fs.constants.COPYFILE_FICLONE)
  fs.chmodSync(to, 0o600)
}

/** The manifest of a backup folder after every digest of it was computed again and found the same. */
export async function readBackup(folder) {
  const manifestFile = path.join(folder, 'manifest.json')
  if (!fs.existsSync(manifestFile)) throw new Trouble(`${folder} is no backup of Smoothside: it has no manifest.json. Name the folder that \`npm run backup\` made (one that ends in .unfinished was broken off).`)
  const manifest = JSON.parse(fs.readFileSync(manifestFile, 'utf8'))
  if (manifest.format !== 1) throw new Trouble(`This backup has format ${manifest.format}; this release of Smoothside reads format 1. Use the release that made it.`)
  for (const { file, sha256 } of manifest.files) {
    const place = path.join(folder, file)
    if (!place.startsWith(path.join(folder, '/'))) throw new Trouble(`The manifest names a file outside of the backup: ${file}. Do not use this backup.`)
    if (!fs.existsSync(place)) throw new Trouble(`The backup lacks the file ${file}. Take another copy of the backup.`)
    if (await digestOf(place) !== sha256) throw new Trouble(`The file ${file} of the backup is not what it was: its digest differs. Take another copy of the backup.`)
  }
  return manifest
}
