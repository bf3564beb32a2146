import 'fake-indexeddb/auto'
import { IDBFactory } from 'fake-indexeddb'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import Dexie from 'dexie'
import { FieldDatabase } from '~/offline/fieldDatabase'
import { FieldSender } from '~/offline/fieldSender'
import { JOB, makeRow, OTHER, ROUND, TestServer, WHO } from './testServer'

let server: TestServer
let db: FieldDatabase
let sender: FieldSender

beforeEach(() => {
  // What a page has and Node has not; no browser rule is at stake here.
  vi.stubGlobal('navigator', { onLine: true })
  vi.stubGlobal('document', { hidden: true, addEventListener: () => {} })
  vi.stubGlobal('addEventListener', () => {})
  vi.stubGlobal('BroadcastChannel', undefined)
  Dexie.dependencies.indexedDB = new IDBFactory()
  server = new TestServer()
  db = new FieldDatabase(WHO.accountId, WHO.organisationId)
  sender = new FieldSender(db, server.wire, WHO)
})

describe('a job that is taken along', () => {
  it('brings what others wrote, not two minutes later', async () => {
    const theirs = makeRow({ author: OTHER })
    server.accept(theirs)
    expect((await sender.take(JOB)).status).toBe(200)
    await vi.waitFor(async () => expect((await db.entries.toArray()).map(row => row.id)).toEqual([theirs.id]), 1000)
  })
  it('brings it as well where a run is under way that began before the job was here', async () => {
    server.accept(makeRow({ author: OTHER }))
    let goOn: (() => void) | undefined
    const { me } = server.wire
    server.wire.me = () => new Promise((resolve) => { goOn = () => resolve(me()) })
    const run = sender.sendNow()
    await vi.waitFor(() => expect(goOn).toBeDefined())
    // The run has read its list of jobs by the time this one is kept.
    const jobs = vi.spyOn(db.jobs, 'toArray').mockResolvedValueOnce([])
    await sender.take(JOB)
    server.wire.me = me
    goOn!()
    await run
    expect(jobs).toHaveBeenCalled()
    await vi.waitFor(async () => expect((await db.rounds.get(ROUND))?.cursor).toBe(1), 1000)
  })
  it('asks for nothing where the server has nothing that is not here', async () => {
    await sender.take(JOB)
    const pull = vi.spyOn(server.wire, 'pull')
    await new Promise(resolve => setTimeout(resolve, 20))
    expect(pull).not.toHaveBeenCalled()
  })
})
