import { randomBytes } from 'node:crypto'
import { access, link, mkdir, open, readFile, rm } from 'node:fs/promises'
import { dirname, join, normalize } from 'node:path'
import type { Storage } from './storage'

/** Files in a folder. A file is written beside, flushed, then linked into its name: a crash leaves the old state or the new one. */
export function folderStorage(folder: string): Storage {
  const at = (key: string) => {
    const path = normalize(join(folder, key))
    if (!path.startsWith(join(folder, '/'))) throw new RangeError('a storage key may not leave its folder')
    return path
  }
  const there = (path: string) => access(path).then(() => true, () => false)
  const storage: Storage = {
    async put(key, bytes) {
      const path = at(key)
      if (await there(path)) return
      await mkdir(dirname(path), { recursive: true })
      const beside = `${path}.${randomBytes(6).toString('hex')}.part`
      const file = await open(beside, 'wx')
      try {
        await file.writeFile(bytes)
        await file.sync()
      }
      finally { await file.close() }
      await link(beside, path).catch((error: NodeJS.ErrnoException) => { if (error.code !== 'EEXIST') throw error })
      await rm(beside, { force: true })
    },
    get: async key => readFile(at(key)).catch((error: NodeJS.ErrnoException) => { if (error.code === 'ENOENT') return null; throw error }),
    has: async key => there(at(key)),
    remove: async key => rm(at(key), { force: true }),
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
