import { randomBytes } from 'node:crypto'
import { DeleteObjectCommand, GetObjectCommand, HeadObjectCommand, PutObjectCommand, S3Client } from '@aws-sdk/client-s3'
import type { Settings } from '../settings'
import type { Storage } from './storage'

const missing = (error: { name?: string, $metadata?: { httpStatusCode?: number } }) => error.name === 'NoSuchKey' || error.name === 'NotFound' || error.$metadata?.httpStatusCode === 404

/** Files in a bucket, path style, so that any S3-speaking store will do. */
export function s3Storage(settings: NonNullable<Settings['s3']>): Storage {
  const client = new S3Client({ endpoint: settings.endpoint, region: settings.region, forcePathStyle: true, credentials: { accessKeyId: settings.accessKeyId, secretAccessKey: settings.secretAccessKey } })
  const Bucket = settings.bucket
  const storage: Storage = {
    async put(Key, bytes) {
      if (!await storage.has(Key)) await client.send(new PutObjectCommand({ Bucket, Key, Body: bytes }))
    },
    async get(Key) {
      try { return Buffer.from(await (await client.send(new GetObjectCommand({ Bucket, Key }))).Body!.transformToByteArray()) }
      catch (error) { if (missing(error as Error)) return null; throw error }
    },
    async has(Key) {
      try { await client.send(new HeadObjectCommand({ Bucket, Key })); return true }
      catch (error) { if (missing(error as Error)) return false; throw error }
    },
    async remove(Key) { await client.send(new DeleteObjectCommand({ Bucket, Key })) },
    async probe() {
      const key = `probe/${randomBytes(6).toString('hex')}`
      await storage.put(key, Buffer.from('there'))
      const back = await storage.get(key)
      await storage.remove(key)
      return back?.toString() === 'there'
    },
  }
  return storage
}
