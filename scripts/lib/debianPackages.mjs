// Installing what the machine lacks, from Debian's own packages.
import { spawnSync } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { findPostgres } from './cluster.mjs'
import { runProgram } from './processes.mjs'
import { say, Trouble } from './steps.mjs'

const onPath = program => (process.env.PATH ?? '').split(':').some(folder => folder && fs.existsSync(path.join(folder, program)))
const there = wanted => wanted === 'postgres' ? findPostgres() !== null : onPath(wanted)

/** What the program itself needs, and what tests need besides: program looked for, Debian's package that brings it. */
export const forRunning = [['postgres', 'postgresql-15']]
export const forTesting = [...forRunning, ['chromium', 'chromium'], ['pdftotext', 'poppler-utils'], ['qpdf', 'qpdf'], ['openssl', 'openssl'], ['certutil', 'libnss3-tools'], ['zbarimg', 'zbar-tools']]

/** Installs the packages whose programs are missing: as root, or through sudo where it asks nothing; else names the one command to run. */
export async function installMissing(wanted, log) {
  const missing = wanted.filter(([program]) => !there(program)).map(([, name]) => name)
  if (!missing.length) return 'everything is there'
  const command = `apt-get update && apt-get install -y --no-install-recommends ${missing.join(' ')}`
  const isRoot = process.getuid?.() === 0
  if (!onPath('apt-get')) throw new Trouble(`This machine lacks ${missing.join(', ')} and has no apt-get to install them. Install PostgreSQL 15 by its own means (PG_BIN_DIR names the folder of its programs), then start again.`)
  if (!isRoot && spawnSync('sudo', ['-n', 'true'], { stdio: 'ignore' }).status !== 0)
    throw new Trouble(`This machine lacks ${missing.join(', ')}, and installing needs an administrator. Run this once, then start again:\n\n    sudo sh -c '${command}'\n`)
  say(`installing ${missing.join(', ')}`)
  const asRoot = parameters => isRoot ? ['env', parameters] : ['sudo', ['-n', 'env', ...parameters]]
  const apt = ['DEBIAN_FRONTEND=noninteractive', 'apt-get', '-q', '-y', '-o', 'DPkg::Lock::Timeout=180']
  const run = (what, parameters) => runProgram(what, ...asRoot(parameters), { log })
  await run('Finishing an installation that was broken off', ['DEBIAN_FRONTEND=noninteractive', 'dpkg', '--configure', '-a'])
  await run('Reading the list of packages', [...apt, 'update'])
  await run('Installing', [...apt, 'install', '--no-install-recommends', ...missing])
  const still = wanted.filter(([program]) => !there(program)).map(([program]) => program)
  if (still.length) throw new Trouble(`The packages were installed and ${still.join(', ')} is still missing. See ${log}.`)
  return missing.join(', ')
}
