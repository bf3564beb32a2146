// Starting, watching and ending other programs. Each gets a process group of its own, so that ending it ends its children too.
import { spawn } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { say, Trouble } from './steps.mjs'

/** When the process began, in the kernel's ticks: a number that was reused belongs to another beginning. Null when it is gone. */
export function bornAt(pid) {
  try {
    const stat = fs.readFileSync(`/proc/${pid}/stat`, 'utf8')
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ')
    return fields[0] === 'Z' ? null : fields[19]
  }
  catch {
    if (fs.existsSync('/proc/self/stat')) return null
    try { process.kill(pid, 0); return 'alive' }
    catch (error) { return error.code === 'EPERM' ? 'alive' : null }
  }
}

const running = new Set()
let note = () => { /* nobody wants to know */ }
/** From now on every start is told: what runs, and its process number. @param {(name: string, pid: number) => void} tell */
export const tellStarts = (tell) => { note = tell }

const pause = milliseconds => new Promise(resolve => setTimeout(resolve, milliseconds))

function signalGroup(pid, signal) {
  try { process.kill(-pid, signal) }
  catch (error) { if (error.code !== 'ESRCH') throw error }
}

/** Asks the group to end, and ends it after the given time. Resolves when its leader is gone. */
export async function endGroup(pid, born = bornAt(pid), patience = 10_000) {
  if (born === null || bornAt(pid) !== born) return
  signalGroup(pid, 'SIGTERM')
  for (let waited = 0; waited < patience && bornAt(pid) === born; waited += 50) await pause(50)
  if (bornAt(pid) === born) signalGroup(pid, 'SIGKILL')
  while (bornAt(pid) === born) await pause(20)
}

let ending = false
/** Ends every program that was started here and still runs, and starts none again. */
export async function endAll(patience) {
  ending = true
  await Promise.all([...running].map(child => endGroup(child.pid, bornAt(child.pid), patience)))
}

/** Starts a program with its output in a file, or on our terminal when none is named. */
export function startProgram(name, command, parameters, { env, cwd, log }) {
  const out = log ? fs.openSync(log, 'a', 0o600) : 'inherit'
  const child = spawn(command, parameters, { cwd, env, detached: true, stdio: ['ignore', out, out] })
  if (log) fs.closeSync(out)
  running.add(child)
  if (child.pid) note(name, child.pid)
  child.once('exit', () => running.delete(child))
  child.once('error', () => running.delete(child))
  return child
}

export const lastLines = (log, count = 15) => fs.existsSync(log) ? fs.readFileSync(log, 'utf8').trimEnd().split('\n').slice(-count).join('\n') : ''

/** Runs a program to its end, with a sign of life every fifteen seconds. Throws with the end of its output when it fails. */
export async function runProgram(what, command, parameters, { env = process.env, cwd, log, allow = [0] }) {
  fs.mkdirSync(path.dirname(log), { recursive: true })
  fs.writeFileSync(log, '', { mode: 0o600 })
  const begin = Date.now()
  const child = startProgram(what, command, parameters, { env, cwd, log })
  const life = setInterval(() => say(`still at it, ${Math.round((Date.now() - begin) / 1000)} s`), 15_000)
  try {
    const code = await new Promise((resolve, reject) => child.once('error', reject).once('exit', (status, signal) => resolve(status ?? signal)))
    if (allow.includes(code)) return
    const end = lastLines(log, 25)
    if (/ENOSPC|No space left on device/i.test(end)) throw Object.assign(new Error(end), { code: 'ENOSPC' })
    throw new Trouble(`${what} did not work (it ended with ${code}). The end of its output, whole in ${log}:\n${end}`)
  }
  finally { clearInterval(life) }
}

/** Starts a program that must keep running: when it ends by itself it is started again, and given up after six quick ends. */
export function keepRunning(name, start, onGivenUp) {
  const ends = []
  const begin = () => start().once('exit', (code, signal) => {
    if (ending) return
    ends.push(Date.now())
    if (ends.filter(at => Date.now() - at < 60_000).length >= 6) return onGivenUp()
    console.error(`  ${name} ended unexpectedly (${signal ?? code}) and is started again`)
    setTimeout(() => { if (!ending) begin() }, 200 * 2 ** Math.min(ends.length - 1, 4))
  })
  begin()
}
