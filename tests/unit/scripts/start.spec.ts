import { spawnSync } from 'node:child_process'
import fs from 'node:fs'
import net from 'node:net'
import os from 'node:os'
import path from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { bornAt } from '../../../scripts/lib/processes.mjs'

const root = path.resolve(import.meta.dirname, '../../..')
const scratch = fs.mkdtempSync(path.join(os.tmpdir(), 'smoothside-start-'))
afterAll(() => { fs.rmSync(scratch, { recursive: true, force: true }) })

/** A start that is to be refused before it makes anything. */
function start(environment: Record<string, string>) {
  const { status, stdout, stderr } = spawnSync(process.execPath, [path.join(root, 'scripts/start.mjs')], { encoding: 'utf8', timeout: 20_000, env: { PATH: process.env.PATH, ...environment } })
  return { status, said: `${stdout}${stderr}` }
}

/** A port that another program has: this one. */
const taken = net.createServer()
let port = ''
beforeAll(async () => {
  await new Promise<void>(resolve => taken.listen(0, '127.0.0.1', resolve))
  port = String((taken.address() as net.AddressInfo).port)
})
afterAll(() => { taken.close() })

describe('a start with something in the way', { timeout: 60_000 }, () => {
  it('names a port that is in use, and one that is free', () => {
    const { status, said } = start({ SMOOTHSIDE_DATA: path.join(scratch, 'a'), PORT: port })
    expect(status).toBe(1)
    expect(said).toMatch(new RegExp(`Port ${port} is in use by another program. Stop that one, or take another port: PORT=\\d+ npm start`))
    expect(fs.existsSync(path.join(scratch, 'a/postgres'))).toBe(false)
  })

  it('refuses a PORT that is none', () => {
    expect(start({ SMOOTHSIDE_DATA: path.join(scratch, 'b'), PORT: 'web' }).said).toContain('PORT is "web", which is no port.')
  })

  it('refuses a file where the data folder should be', () => {
    fs.writeFileSync(path.join(scratch, 'file'), '')
    expect(start({ SMOOTHSIDE_DATA: path.join(scratch, 'file') }).said).toContain('is a file, not a folder')
    expect(start({ SMOOTHSIDE_DATA: path.join(scratch, 'file/below') }).said).toContain('because a part of that path is a file')
  })

  it('says who uses the data folder, and leaves that one alone', () => {
    const folder = path.join(scratch, 'c')
    fs.mkdirSync(path.join(folder, 'run'), { recursive: true })
    const claim = JSON.stringify({ pid: process.pid, born: bornAt(process.pid), what: 'a test runs here', children: [{ name: 'web', pid: process.pid, born: bornAt(process.pid) }] })
    fs.writeFileSync(path.join(folder, 'run/claim.json'), claim)
    const { status, said } = start({ SMOOTHSIDE_DATA: folder })
    expect(status).toBe(1)
    expect(said).toContain(`a test runs here (process ${process.pid})`)
    expect(fs.readFileSync(path.join(folder, 'run/claim.json'), 'utf8')).toBe(claim)
  })

  it('does not take a process for the one it knew when only the number is the same', () => {
    const folder = path.join(scratch, 'd')
    fs.mkdirSync(path.join(folder, 'run'), { recursive: true })
    fs.writeFileSync(path.join(folder, 'run/claim.json'), JSON.stringify({ pid: process.pid, born: 'long ago', what: '', children: [{ name: 'web', pid: process.pid, born: 'long ago' }] }))
    // goes on to the port, which is refused; this process, whose number stood in the claim, lives to say so
    expect(start({ SMOOTHSIDE_DATA: folder, PORT: port }).said).toContain(`Port ${port} is in use`)
  })
})
