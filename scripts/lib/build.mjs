// Building the server and the screens, when what they are made of changed.
import { createHash } from 'node:crypto'
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { assertRoom, projectRoot } from './dataFolder.mjs'
import { runProgram } from './processes.mjs'

const sources = ['app', 'server', 'shared', 'templates', 'i18n', 'public', 'drizzle', 'nuxt.config.ts', 'tailwind.config.ts', 'tsconfig.json', 'package.json', 'package-lock.json']
export const serverEntry = path.join(projectRoot, '.output/server/index.mjs')
/** Lies inside the output: a build that was broken off or removed has none. */
const mark = path.join(projectRoot, '.output/sources.sha256')
export const nuxtProgram = path.join(projectRoot, 'node_modules/nuxt/bin/nuxt.mjs')

function filesUnder(place) {
  const full = path.join(projectRoot, place)
  if (!fs.existsSync(full)) return []
  if (!fs.statSync(full).isDirectory()) return [place]
  return fs.readdirSync(full).sort().flatMap(name => filesUnder(path.join(place, name)))
}

function sourcesDigest() {
  const hash = createHash('sha256')
  for (const file of sources.flatMap(filesUnder)) {
    const bytes = fs.readFileSync(path.join(projectRoot, file))
    hash.update(`${file}\0${bytes.length}\0`).update(bytes)
  }
  return hash.digest('hex')
}

/** Builds unless the output stands for exactly these sources. @param {string} log */
export async function buildIfChanged(log) {
  const digest = sourcesDigest()
  if (fs.existsSync(serverEntry) && fs.existsSync(mark) && fs.readFileSync(mark, 'utf8') === digest) return 'nothing changed'
  assertRoom(projectRoot, 400, 'building')
  fs.rmSync(mark, { force: true })
  await runProgram('Building', process.execPath, [nuxtProgram, 'build'], { cwd: projectRoot, log, env: { ...process.env, NODE_ENV: 'production', NUXT_TELEMETRY_DISABLED: '1' } })
  fs.writeFileSync(mark, digest)
  return 'built'
}
