import { useSettings } from '../settings'
import { folderStorage } from './folderStorage'
import { s3Storage } from './s3Storage'

/** Files named by what they are: `photo/<organisation>/<digest>`, `record/<organisation>/<digest>.pdf`. Written once, never over. */
export interface Storage {
  /** Writes whole or not at all; a key that is there already is left as it is. */
  put(key: string, bytes: Uint8Array): Promise<void>
  /** The bytes, or null where there are none. */
  get(key: string): Promise<Buffer | null>
  has(key: string): Promise<boolean>
  remove(key: string): Promise<void>
  /** Writes and reads back a few bytes. */
  probe(): Promise<boolean>
}

let storage: Storage | undefined

/** A folder in the data folder by default, S3 when an endpoint is set. */
export function useStorage(): Storage {
  const { s3, dataFolder } = useSettings()
  return storage ??= s3 ? s3Storage(s3) : folderStorage(`${dataFolder}/files`)
}
