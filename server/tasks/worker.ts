import { entrance } from '../database/entrance'
import { logger } from '../logger'
import { type Task, workQueues } from './queue'

const later = async (task: Task) => { logger.warn({ id: task.id }, 'no handler yet') }

/** The background half: seals, sends, reminds; says every half minute that it is there. */
export async function startWorker(): Promise<void> {
  await workQueues({ seal: later, send: later, remind: later })
  await entrance.workerSeen()
  setInterval(() => { entrance.workerSeen().catch(() => logger.warn('heartbeat lost')) }, 30_000).unref()
}
