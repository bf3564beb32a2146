import { entrance } from '../database/entrance'
import { logger } from '../logger'
import { sealRecord } from '../services/record/sealRecord'
import { mailSheet } from '../services/question/putQuestions'
import { mailRecord } from '../services/transmittal/mailRecord'
import { workQueues } from './queue'

/** The background half: seals, sends and asks; says every half minute that it is there; takes up sealings that an earlier worker died over. */
export async function startWorker(): Promise<void> {
  await workQueues({
    seal: task => sealRecord(task.organisationId, task.id),
    send: task => mailRecord(task.organisationId, task.id),
    ask: task => mailSheet(task.organisationId, task.id),
  })
  await entrance.workerSeen()
  setInterval(() => { entrance.workerSeen().catch(() => logger.warn('heartbeat lost')) }, 30_000).unref()
  for (const left of await entrance.unfinishedSealings()) {
    sealRecord(left.organisation_id, left.id).catch((error: Error) => logger.warn({ record: left.id, code: (error as { code?: string }).code }, 'a sealing that was left stays where it is'))
  }
}
