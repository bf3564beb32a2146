// The project's own packages, as the lock names them.
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { assertRoom, projectRoot } from './dataFolder.mjs'
import { runProgram } from './processes.mjs'

const packagesOf = file => JSON.parse(fs.readFileSync(path.join(projectRoot, file), 'utf8')).packages

/** True when node_modules holds what the lock names. npm writes its own list last, so a broken-off installation shows. */
function upToDate() {
  if (!fs.existsSync(path.join(projectRoot, 'node_modules/.package-lock.json'))) return false
  const wanted = packagesOf('package-lock.json')
  const have = packagesOf('node_modules/.package-lock.json')
  return Object.entries(have).every(([place, { version }]) => wanted[place]?.version === version)
    && Object.entries(wanted).every(([place, { optional, devOptional }]) => !place || optional || devOptional || place in have)
}

/** Installs the packages when the lock or the folder changed. @param {string} log */
export async function installNodeModules(log) {
  if (upToDate()) return 'as the lock names them'
  assertRoom(projectRoot, 1500, 'installing the packages')
  const npm = process.env.npm_execpath?.endsWith('.js') ? [process.execPath, [process.env.npm_execpath]] : ['npm', []]
  // building needs the packages for development too, whatever NODE_ENV says
  await runProgram('Installing the packages (npm ci)', npm[0], [...npm[1], 'ci', '--include=dev', '--no-audit', '--no-fund'], { cwd: projectRoot, log })
  return 'installed'
}
