import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startServer, type RunningServer } from '../helpers/server'
import { Visitor } from '../helpers/visitor'

let server: RunningServer
beforeAll(async () => { server = await startServer() }, 60_000)
afterAll(() => server.stop())

/** A file of so many megabytes that begins as a PDF does. */
const file = (megabytes: number) => Buffer.concat([Buffer.from('%PDF-1.7\n'), Buffer.alloc(megabytes * 1_000_000 - 9, 0x20)])
const check = (bytes: Buffer) => new Visitor(server.baseURL).send('POST', '/api/check', bytes, { 'content-type': 'application/pdf' })

describe('the public check of a file', { timeout: 60_000 }, () => {
  it('looks into one of 35 MB', async () => {
    expect(await check(file(35))).toMatchObject({ status: 200, json: { verdict: 'notFromHere' } })
  })

  it('refuses one of 41 MB, and says how much it takes', async () => {
    expect(await check(file(41))).toMatchObject({ status: 413, type: 'application/problem+json', json: { type: '/problems/tooLarge', detail: expect.stringContaining('40 MB') as string } })
  })
})
