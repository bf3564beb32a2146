import PgBoss from 'pg-boss'
import type { Tx } from '../database/withSession'
import { useSettings } from '../settings'
import { logger } from '../logger'
import queues from './queues.json'

export type Queue = 'seal' | 'send' | 'ask'
/** A queued task names its row and nothing else (contracts.md 6). */
export interface Task { organisationId: string, id: string }

let boss: PgBoss | undefined

/** The queue of this process. Schema and queues were made by the owner; here nothing is migrated. */
async function useBoss(): Promise<PgBoss> {
  if (boss) return boss
  const { databaseUrl, runsWorker } = useSettings()
  const made = new PgBoss({ connectionString: databaseUrl, migrate: false, max: runsWorker ? 4 : 1, supervise: runsWorker, schedule: false, maintenanceIntervalSeconds: 10 })
  made.on('error', (error: Error) => logger.warn({ code: (error as { code?: string }).code }, 'queue'))
  await made.start()
  return boss = made
}

/** Puts a task into the queue inside the caller's transaction: it is there if and only if the transaction is. */
export async function enqueue(tx: Tx, queue: Queue, task: Task, startAfterSeconds = 0): Promise<void> {
  await (await useBoss()).send(queue, task, { startAfter: startAfterSeconds, db: { executeSql: (text: string, values: unknown[]) => tx.client.query(text, values) } })
}

/** Works off the queues with the given handlers. A task whose worker dies comes back after its time limit. */
export async function workQueues(handlers: Record<Queue, (task: Task) => Promise<void>>): Promise<void> {
  const running = await useBoss()
  for (const queue of queues as Queue[]) {
    await running.work<Task>(queue, { pollingIntervalSeconds: 0.5 }, async (tasks) => {
      for (const task of tasks) await handlers[queue](task.data)
    })
  }
}

export async function stopQueue(): Promise<void> {
  await boss?.stop({ graceful: true, timeout: 8000 })
  boss = undefined
}
