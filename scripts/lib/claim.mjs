// One start at a time may use a data folder. What it started is written down, so that the next start can clear up after a crash.
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { data } from './dataFolder.mjs'
import { bornAt, endGroup, tellStarts } from './processes.mjs'
import { Trouble } from './steps.mjs'
import { writeWhole } from './secrets.mjs'

const file = path.join(data.run, 'claim.json')
const mine = { pid: process.pid, born: bornAt(process.pid), what: '', children: [] }

function read() {
  try { return JSON.parse(fs.readFileSync(file, 'utf8')) }
  catch (error) {
    if (['ENOENT', 'ENOTDIR', 'EACCES'].includes(error.code) || error instanceof SyntaxError) return null // not ours, then
    throw error
  }
}

/**
 * Claims the data folder for this process.
 * @param {string} what is said to whoever comes second
 * @returns {Promise<string>} what an earlier, broken-off start had left running and was ended
 */
export async function claimDataFolder(what) {
  mine.what = what
  const earlier = read()
  if (earlier && bornAt(earlier.pid) === earlier.born)
    throw new Trouble(`The data folder ${data.root} is in use: ${earlier.what} (process ${earlier.pid}). Stop that one first (Ctrl-C where it runs), or set SMOOTHSIDE_DATA to another folder.`)
  const left = (earlier?.children ?? []).filter(child => bornAt(child.pid) === child.born)
  await Promise.all(left.map(child => endGroup(child.pid, child.born)))
  fs.rmSync(file, { force: true })
  try { fs.writeFileSync(file, JSON.stringify(mine), { mode: 0o600, flag: 'wx' }) }
  catch (error) {
    if (error.code === 'EEXIST') throw new Trouble(`Another start is using the data folder ${data.root} at this very moment. Wait for it, or set SMOOTHSIDE_DATA to another folder.`)
    throw error
  }
  tellStarts((name, pid) => {
    mine.children = [...mine.children.filter(child => child.name !== name), { name, pid, born: bornAt(pid) }]
    writeWhole(file, JSON.stringify(mine))
  })
  return left.length ? `an earlier start was broken off; ended what it left running: ${left.map(child => child.name).join(', ')}` : data.root
}

export const holdsDataFolder = () => read()?.pid === process.pid

/** Gives the data folder free again, if this process holds it. */
export function releaseDataFolder() {
  if (holdsDataFolder()) fs.rmSync(file, { force: true })
}
