import { createHash } from 'node:crypto'
import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { createServer } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { uuidv7 } from 'uuidv7'
import type { Session } from '../../server/database/withSession'
import { withSession } from '../../server/database/withSession'
import { basesOf, newestRound } from '../../server/database/queries/round'
import { DemoWalker } from '../../server/demo/demoWalker'
import { acceptEntries } from '../../server/services/entry/acceptEntries'
import { saveLine } from '../../server/services/job/saveLine'
import { requestSealing } from '../../server/services/record/requestSealing'
import { readBasis, roundFold } from '../../server/services/round/foldRound'
import { stopQueue } from '../../server/tasks/queue'
import { elementsOf } from '#shared/line/line'
import { readQuickLine } from '#shared/line/readQuickLine'
import { INCH } from '#shared/measure/length'
import { consentOf } from '#shared/round/consent'
import { fold } from '#shared/round/fold'
import { makeSignSheet } from '#shared/round/signSheet'
import { makeScene, type Scene, type TestOrganisation } from './scene'

/** A scene whose services can seal, store and mail: a folder of its own, and an SMTP server that takes or refuses as told. */
export interface SealingScene extends Scene { folder: string, mail: { taken: string[], refuse: boolean } }

export async function makeSealingScene(): Promise<SealingScene> {
  const folder = mkdtempSync(join(tmpdir(), 'smoothside-sealing-'))
  const mail = { taken: [] as string[], refuse: false }
  const smtp = createServer((socket) => {
    let letter = ''
    let inData = false
    socket.on('error', () => undefined)
    socket.write('220 here\r\n')
    socket.on('data', (part) => {
      for (const line of part.toString('latin1').split('\r\n')) {
        if (inData) {
          if (line === '.') {
            inData = false
            mail.taken.push(letter)
            letter = ''
            socket.write('250 kept as 1\r\n')
          }
          else letter += `${line}\n`
        }
        else if (/^DATA/i.test(line)) {
          inData = true
          socket.write('354 go\r\n')
        }
        else if (/^QUIT/i.test(line)) socket.end('221 bye\r\n')
        else if (line) socket.write(mail.refuse && /^RCPT/i.test(line) ? '550 no such mailbox\r\n' : '250 ok\r\n')
      }
    })
  })
  const port = await new Promise<number>(resolve => smtp.listen(0, '127.0.0.1', () => resolve((smtp.address() as { port: number }).port)))
  Object.assign(process.env, { SMOOTHSIDE_DATA: folder, SMOOTHSIDE_SECRET: 'b2'.repeat(32), NUXT_SESSION_PASSWORD: 'p'.repeat(40), SMOOTHSIDE_ORIGIN: 'http://smoothside.example', SMTP_URL: `smtp://127.0.0.1:${port}`, LOG_LEVEL: 'silent' })
  const scene = await makeScene()
  process.env.DATABASE_URL_APP = scene.database.appUrl
  return {
    ...scene, folder, mail,
    async end() {
      await stopQueue()
      await scene.end()
      await new Promise(resolve => smtp.close(resolve))
      rmSync(folder, { recursive: true, force: true })
    },
  }
}

const staffOf = (side: TestOrganisation, role: 'manager' | 'inspector') => side.as(role) as Session & { accountId: string, organisationId: string }

/** The line of a small school yard, saved: the first round is open after it. */
export async function drawLineOf(side: TestOrganisation): Promise<void> {
  const read = readQuickLine('all: 6 ft high, 2 in mesh, school, soft ground\nA (Street side): R1 24 ft run; G1 4 ft gate, self-closing; R2 30 ft run', { system: 'imperial', newId: () => uuidv7() })
  if ('errors' in read) throw new Error(JSON.stringify(read.errors))
  await saveLine(staffOf(side, 'manager'), side.jobId, 0, read.line, 'First line')
}

async function walkerOf(side: TestOrganisation, role: 'manager' | 'inspector') {
  const session = staffOf(side, role)
  const { round, bases } = await withSession(session, async tx => ({ round: (await newestRound(tx, side.jobId))!, bases: await basesOf(tx, side.jobId) }))
  const pinned = readBasis(round.basis, bases.find(one => one.digest === round.basis)!.text)
  const walker = new DemoWalker({ organisation: side.id, job: side.jobId, round: round.id, basis: round.basis }, pinned, { id: session.accountId, name: role === 'manager' ? 'Moira Tell' : 'Ivo Sand' }, new Date('2026-11-30T14:00:00Z'))
  const send = async () => {
    const { results } = await acceptEntries(session, round.id, walker.wires.splice(0))
    const bad = results.find(one => one.state !== 'accepted')
    if (bad) throw new Error(JSON.stringify(bad))
  }
  return { walker, round, pinned, send }
}

/** Walks the whole line: all conforms, or one bay's posts stand too far apart. Returns that reading. */
export async function walkAll(side: TestOrganisation, wide: boolean): Promise<string | undefined> {
  const { walker, pinned, send } = await walkerOf(side, 'inspector')
  walker.openWalk('Phone of a test')
  const run = elementsOf(pinned.line)[0]!
  const finding = { element: run.id, check: 'post-spacing', tag: 'A1', value: { method: 'measure' as const, amount: 122 * INCH, text: '10 ft 2 in', system: 'imperial' as const }, place: { face: null, bay: 2, from: null, height: null }, photos: [] }
  const ids = walker.answer(wide ? [finding] : [])
  await send()
  return ids.get('A1')
}

/** The manager offers that reading to the owner; anew where an offer is named. */
export async function offer(side: TestOrganisation, reading: string, before: string[] = []): Promise<string> {
  const { walker, pinned, send } = await walkerOf(side, 'manager')
  const run = elementsOf(pinned.line)[0]!
  const id = walker.write('deviationOffered', { words: 'One bay is 10 ft 2 in; fabric and ties conform.', condition: 'No wind screen is hung there.', until: '2028-06-30' }, { element: run.id, check: 'post-spacing', place: { face: null, bay: 2, from: null, height: null }, answers: [reading, ...before] })
  await send()
  return id
}

/** The inspector signs what stands, and the manager asks for the record. Returns the record's id. */
export async function signAndRequest(side: TestOrganisation, scope: 'interim' | 'final'): Promise<string> {
  const { walker, round, pinned, send } = await walkerOf(side, 'inspector')
  // A round that goes on from a sealed one holds nothing yet that could be signed.
  if (round.accepted === 0) {
    walker.openWalk('Phone of a test')
    await send()
  }
  const session = staffOf(side, 'inspector')
  const { entries, bases, options } = await withSession(session, async tx => roundFold(tx, { ...(await newestRound(tx, side.jobId))!, jobId: side.jobId }))
  const signer = { account: session.accountId, name: 'Ivo Sand' }
  const sheet = makeSignSheet(entries, fold(entries, bases, options), pinned, { scope, meaning: 'present', consent: consentOf('present', 'en'), signer, role: 'inspector', known: 'ownAccount', presence: null })
  walker.write('signature', { state: 'signed', meaning: 'present', signer, role: 'inspector', known: 'ownAccount', presence: null, sheet: sheet.text, sheetDigest: sheet.digest, strokes: null, typed: 'Ivo Sand' })
  await send()
  const id = uuidv7()
  await requestSealing(staffOf(side, 'manager'), side.jobId, { id, scope, overDevices: null })
  return id
}

/** SHA-256 of a file under the scene's store, or null. */
export function digestOfFile(scene: SealingScene, key: string): string | null {
  try { return createHash('sha256').update(readFileSync(join(scene.folder, 'files', key))).digest('hex') }
  catch { return null }
}
