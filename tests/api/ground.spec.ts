import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { layServerGround, startServer, type ServerGround } from '../helpers/server'

let ground: ServerGround
beforeAll(async () => { ground = await layServerGround() })
afterAll(async () => { await ground.remove() })

const health = async (baseURL: string) => (await fetch(`${baseURL}/health/ready`)).json() as Promise<{ ready: boolean, parts: Record<string, boolean> }>

describe('the built server', () => {
  it('is ready when everything that it needs is there, and again after it was killed', async () => {
    const first = await startServer({ ground })
    const { ready, parts } = await health(first.baseURL)
    expect(ready).toBe(true)
    expect(parts).toMatchObject({ database: true, schema: true, storage: true, worker: true })
    await first.kill()
    const second = await startServer({ ground })
    expect(second.baseURL).toBe(first.baseURL)
    expect((await health(second.baseURL)).ready).toBe(true)
    await second.stop()
    await expect(fetch(second.baseURL)).rejects.toThrow()
  })

  it('runs as web and worker apart', async () => {
    const web = await startServer({ ground, role: 'web' })
    const worker = await startServer({ ground, role: 'worker' })
    expect((await health(web.baseURL)).ready).toBe(true)
    await Promise.all([web.stop(), worker.stop()])
  })

  it('refuses to run with a role that could look past row-level security, or without its secret', async () => {
    await expect(startServer({ ground, environment: { DATABASE_URL_APP: ground.database.adminUrl } })).rejects.toThrow('too powerful')
    await expect(startServer({ ground, environment: { DATABASE_URL_APP: ground.database.ownerUrl } })).rejects.toThrow('too powerful')
    await expect(startServer({ ground, environment: { SMOOTHSIDE_SECRET: '' } })).rejects.toThrow('SMOOTHSIDE_SECRET is not set')
  })
})
