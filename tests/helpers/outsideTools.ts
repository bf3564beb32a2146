import { execFileSync, spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

/** A folder of its own for one test file, removed by `remove`. */
export function testFolder(): { path: (name: string) => string, put: (name: string, bytes: Uint8Array | string) => string, remove: () => void } {
  const folder = mkdtempSync(join(tmpdir(), 'smoothside-documents-'))
  const path = (name: string) => join(folder, name)
  return {
    path,
    put: (name, bytes) => {
      writeFileSync(path(name), bytes)
      return path(name)
    },
    remove: () => rmSync(folder, { recursive: true, force: true }),
  }
}

/** Runs a program and gives what it printed; throws when it fails. */
export function run(program: string, ...args: string[]): string {
  return execFileSync(program, args, { encoding: 'utf8', stdio: ['ignore', 'pipe', 'pipe'], maxBuffer: 64 * 1024 * 1024 })
}

/** Runs a program that may refuse: its exit code and everything it printed. */
export function tryRun(program: string, ...args: string[]): { code: number | null, printed: string } {
  const { status, stdout, stderr, error } = spawnSync(program, args, { encoding: 'utf8', maxBuffer: 64 * 1024 * 1024 })
  if (error) throw error
  return { code: status, printed: `${stdout}\n${stderr}` }
}

export function pem(der: Uint8Array): string {
  return `-----BEGIN CERTIFICATE-----\n${Buffer.from(der).toString('base64').replace(/(.{64})/g, '$1\n').trim()}\n-----END CERTIFICATE-----\n`
}
