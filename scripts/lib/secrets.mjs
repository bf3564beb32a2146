// Random secrets that are made once and kept, readable by their owner only.
import { randomBytes } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'

/** Writes a file whole or not at all: a crash leaves the old one or the new one. */
export function writeWhole(file, text, mode = 0o600) {
  const draft = `${file}.unfinished`
  const handle = fs.openSync(draft, 'w', mode)
  try {
    fs.writeSync(handle, text)
    fs.fsyncSync(handle)
  }
  finally { fs.closeSync(handle) }
  fs.chmodSync(draft, mode)
  fs.renameSync(draft, file)
}

/**
 * The secrets of a file; those of `names` that it lacks are made (32 random bytes, hexadecimal) and kept.
 * @template {string} Name
 * @param {string} file
 * @param {readonly Name[]} names
 * @returns {Record<Name, string>}
 */
export function keepSecrets(file, names) {
  fs.mkdirSync(path.dirname(file), { recursive: true, mode: 0o700 })
  const kept = fs.existsSync(file) ? JSON.parse(fs.readFileSync(file, 'utf8')) : {}
  const missing = names.filter(name => !kept[name])
  for (const name of missing) kept[name] = randomBytes(32).toString('hex')
  if (missing.length) writeWhole(file, `${JSON.stringify(kept, null, 2)}\n`)
  return kept
}
