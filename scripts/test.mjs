// npm test: everything that proves the project, from a fresh machine on; the last line counts.
import './lib/nodeVersion.mjs'
import { spawn } from 'node:child_process'
import fs from 'node:fs'
import os from 'node:os'
import path from 'node:path'
import process from 'node:process'
import { buildIfChanged, nuxtProgram } from './lib/build.mjs'
import { projectRoot } from './lib/dataFolder.mjs'
import { forTesting, installMissing } from './lib/debianPackages.mjs'
import { installNodeModules } from './lib/nodeModules.mjs'
import { endAll, endGroup } from './lib/processes.mjs'
import { explain, Trouble } from './lib/steps.mjs'

const projects = ['unit', 'published', 'documents', 'database', 'api', 'browser']
/** A part that hangs must not hide the others. */
const patience = { ordinary: 6 * 60_000, browser: 20 * 60_000 }

const scratch = fs.mkdtempSync(path.join(os.tmpdir(), 'smoothside-run-'))
const logOf = name => path.join(scratch, `${name}.log`)
const tool = place => path.join(projectRoot, 'node_modules', place)
const total = { passed: 0, failed: 0, skipped: 0 }
const told = []
let cluster
let shown

/** Runs a part that counts as one test. Whatever happens, the next part runs. */
async function part(title, run) {
  console.log(`\n== ${title}`)
  const begin = Date.now()
  let outcome
  try { outcome = await run() }
  catch (error) {
    console.error(explain(error) ?? error)
    outcome = { passed: 0, failed: 1, skipped: 0 }
  }
  for (const key of Object.keys(total)) total[key] += outcome[key]
  told.push(`${title}: ${sentence(outcome)} (${Math.round((Date.now() - begin) / 1000)} s)`)
  return outcome.failed === 0
}
const one = { passed: 1, failed: 0, skipped: 0 }
const sentence = ({ passed, failed, skipped }) => `${passed} passed, ${failed} failed${skipped ? `, ${skipped} skipped` : ''}`

/** Runs a program with its output shown; resolves to its exit code, or null when it took too long. */
async function run(parameters, { env = process.env, milliseconds = patience.ordinary } = {}) {
  const child = spawn(process.execPath, parameters, { cwd: projectRoot, env, detached: true, stdio: ['ignore', 'inherit', 'inherit'] })
  shown = child
  let late = false
  const timer = setTimeout(() => {
    late = true
    console.error(`took longer than ${milliseconds / 60_000} minutes and was ended`)
    void endGroup(child.pid)
  }, milliseconds)
  const code = await new Promise(resolve => child.once('exit', resolve))
  clearTimeout(timer)
  return late ? null : code
}

async function mustSucceed(parameters, options) {
  const code = await run(parameters, options)
  if (code !== 0) throw new Trouble(code === null ? 'took too long' : `ended with ${code}`)
  return one
}

/** What vitest's own report counts; a file that could not be loaded counts as one failed, and so does a project that says nothing. */
function countsOf(report, code) {
  if (!fs.existsSync(report)) return { passed: 0, failed: 1, skipped: 0 }
  const { numPassedTests, numFailedTests, numPendingTests, numTodoTests, testResults } = JSON.parse(fs.readFileSync(report, 'utf8'))
  const unloaded = testResults.filter(file => file.status === 'failed' && file.assertionResults.every(test => test.status !== 'failed')).length
  const failed = numFailedTests + unloaded
  return { passed: numPassedTests, failed: failed || (code === 0 ? 0 : 1), skipped: numPendingTests + numTodoTests }
}

async function runProject(name) {
  const report = path.join(scratch, `${name}.json`)
  const code = await run([tool('vitest/vitest.mjs'), 'run', '--project', name, '--reporter=default', '--reporter=json', `--outputFile.json=${report}`], {
    env: { ...process.env, TEST_PG_URL: cluster?.url ?? '', NODE_ENV: 'test', TZ: 'UTC' },
    milliseconds: name === 'browser' ? patience.browser : patience.ordinary,
  })
  return countsOf(report, code)
}

async function all() {
  const ready = await part('what the machine and the project need', async () => {
    console.log(await installMissing(forTesting, logOf('packages')))
    console.log(await installNodeModules(logOf('npm')))
    return one
  })
  if (!ready) return
  await part('nuxt prepare', () => mustSucceed([nuxtProgram, 'prepare']))
  await part('lint', () => mustSucceed([tool('eslint/bin/eslint.js'), '.']))
  await part('types of app, server and shared', () => mustSucceed([nuxtProgram, 'typecheck']))
  await part('types of tests', () => mustSucceed([tool('typescript/bin/tsc'), '-p', 'tsconfig.tools.json', '--noEmit']))
  await part('build', async () => {
    console.log(await buildIfChanged(logOf('build')))
    return one
  })
  await part('a PostgreSQL for the tests', async () => {
    const { startOwnTestCluster } = await import('./lib/testCluster.mjs')
    cluster = await startOwnTestCluster()
    return one
  })
  const only = process.argv.slice(2)
  for (const name of only.length ? projects.filter(project => only.includes(project)) : projects)
    await part(`tests: ${name}`, () => runProject(name))
}

async function clearUp() {
  if (shown?.pid) await endGroup(shown.pid)
  await endAll()
  cluster?.stop()
  cluster = undefined
  fs.rmSync(scratch, { recursive: true, force: true })
}
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'])
  process.once(signal, () => void clearUp().finally(() => process.exit(130)))

await all()
const failedLogs = total.failed ? fs.readdirSync(scratch).filter(name => name.endsWith('.log')) : []
if (!failedLogs.length) await clearUp()
else {
  cluster?.stop()
  console.log(`\nLogs: ${failedLogs.map(logOf).join(' ')}`)
}
console.log(`\n${told.join('\n')}\n\n${sentence(total)}`)
process.exitCode = total.failed ? 1 : 0
