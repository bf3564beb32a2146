import { mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { folderStorage } from '#server/storage/folderStorage'
import { s3Storage } from '#server/storage/s3Storage'
import type { Storage } from '#server/storage/storage'
import { startFakeS3 } from '../../helpers/fakeS3'

const folder = mkdtempSync(join(tmpdir(), 'smoothside-files-'))
let fake: Awaited<ReturnType<typeof startFakeS3>>
const stores: Record<string, Storage> = { 'a folder': folderStorage(folder) }

beforeAll(async () => {
  fake = await startFakeS3()
  stores['an S3 bucket'] = s3Storage({ endpoint: fake.endpoint, bucket: 'records', region: 'us-east-1', accessKeyId: 'a', secretAccessKey: 'b' })
})
afterAll(async () => {
  await fake.stop()
  rmSync(folder, { recursive: true })
})

describe.each(['a folder', 'an S3 bucket'])('files in %s', (name) => {
  const key = 'record/org/abc.pdf'
  const bytes = Buffer.from([0, 1, 2, 250, 251, 13, 10, 0])

  it('come back byte for byte', async () => {
    await stores[name]!.put(key, bytes)
    expect(await stores[name]!.get(key)).toEqual(bytes)
    expect(await stores[name]!.has(key)).toBe(true)
  })

  it('are written once and never over', async () => {
    await stores[name]!.put(key, Buffer.from('something else'))
    expect(await stores[name]!.get(key)).toEqual(bytes)
  })

  it('are null where there are none', async () => {
    expect(await stores[name]!.get('record/org/none.pdf')).toBeNull()
    expect(await stores[name]!.has('record/org/none.pdf')).toBe(false)
  })

  it('can be taken away, and probed', async () => {
    await stores[name]!.remove(key)
    expect(await stores[name]!.get(key)).toBeNull()
    expect(await stores[name]!.probe()).toBe(true)
  })
})

describe('a folder', () => {
  it('leaves no half-written file beside, and one whole one when two write at once', async () => {
    const store = stores['a folder']!
    await Promise.all(Array.from({ length: 8 }, (_, at) => store.put('photo/org/x.jpg', Buffer.alloc(100_000, at))))
    const back = (await store.get('photo/org/x.jpg'))!
    expect(new Set(back).size).toBe(1)
    expect(back).toHaveLength(100_000)
    expect(readdirSync(join(folder, 'photo/org'))).toEqual(['x.jpg'])
  })

  it('refuses a key that leaves it', async () => {
    await expect(stores['a folder']!.get('../secret')).rejects.toThrow(RangeError)
  })
})

describe('an S3 bucket', () => {
  it('tells a store that does not answer from a file that is not there', async () => {
    fake.refuse(true)
    await expect(s3Storage({ endpoint: fake.endpoint, bucket: 'records', region: 'us-east-1', accessKeyId: 'a', secretAccessKey: 'b', maxAttempts: 1 } as never).get('x')).rejects.toThrow()
    fake.refuse(false)
  })
})
