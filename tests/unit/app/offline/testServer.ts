import type { Me } from '#shared/api/account'
import type { EntryKind, PayloadOf, PhotoRef } from '#shared/entry/entry'
import { makeEntry } from '#shared/entry/makeEntry'
import { sha256Hex } from '#shared/record/canonicalJson'
import type { FieldBundle, PullAnswer, PushResult, PushAnswer } from '#shared/sync/sync'
import { uuidv7 } from 'uuidv7'
import type { EntryRow } from '~/offline/fieldDatabase'
import { headOf } from '~/offline/fieldStore'
import type { FieldWire, Reply } from '~/offline/fieldWire'

export const WHO = { accountId: '018f0000-0000-7000-8000-00000000000a', organisationId: '018f0000-0000-7000-8000-0000000000a0', device: '018f0000-0000-7000-8000-0000000000d1', name: 'test device' }
export const OTHER = '018f0000-0000-7000-8000-00000000000b'
export const JOB = '018f0000-0000-7000-8000-0000000000b0'
export const ROUND = '018f0000-0000-7000-8000-0000000000c0'
export const ELEMENT = '018f0000-0000-7000-8000-0000000000e0'
export const BASIS = sha256Hex('a basis')

const me: Me = { account: { id: WHO.accountId, email: 'ines@fence.example', name: 'Ines', language: 'en' }, standing: 'staff', role: 'inspector', organisation: { id: WHO.organisationId, name: 'Fence' }, standings: [] }
const answer = <T>(status: number, body: T | null = null, code = ''): Reply<T> => ({ status, body, problem: status >= 400 ? { code, message: code } : null, retryAfterSeconds: 0 })

interface Stored { envelope: string, payload: string, number: number }
type Route = 'me' | 'take' | 'push' | 'pull' | 'photo'
/** What goes wrong with one request: on its way there, on its way back, or the server says so; `dies` ends the program there and then. */
export type Mishap = 'none' | 'lost' | 'answerLost' | 'diesBefore' | 'diesAfter' | 'status503' | 'status401' | 'writesMeanwhile'
export class Died extends Error {}

/** A server as contracts.md 2 has it, written anew for tests: union by id and text, gapless numbers, holding what names the unknown. */
export class TestServer {
  epoch = 'epoch 1'
  entries = new Map<string, Stored>()
  held = new Map<string, { envelope: string, payload: string }>()
  photos = new Set<string>()
  empty = false
  pushes: string[][] = []
  missingPhotos: string[] = []
  mishaps: Mishap[] = []
  refuse: (id: string) => PushResult['refusal'] = () => null
  tooLarge: (ids: string[]) => boolean = () => false
  meanwhile: () => Promise<unknown> = async () => {}
  me: Me | null = me

  accept(wire: { envelope: string, payload: string }): number {
    const number = this.entries.size + 1
    this.entries.set(headOf(wire.envelope).id, { ...wire, number })
    for (const [id, held] of this.held) {
      if (headOf(held.envelope).names.every(name => this.entries.has(name))) {
        this.held.delete(id)
        this.accept(held)
      }
    }
    return number
  }

  private offer(wire: { envelope: string, payload: string }): PushResult {
    const { id, names } = headOf(wire.envelope)
    const here = this.entries.get(id)
    if (here) return { id, state: here.envelope === wire.envelope ? 'resent' : 'quarantined', number: here.envelope === wire.envelope ? here.number : null, refusal: null }
    const refusal = this.refuse(id)
    if (refusal) return { id, state: 'refused', number: null, refusal }
    for (const { digest } of (JSON.parse(wire.payload) as { photos?: PhotoRef[] }).photos ?? []) if (!this.photos.has(digest)) this.missingPhotos.push(digest)
    if (!names.every(name => this.entries.has(name))) {
      this.held.set(id, wire)
      return { id, state: 'held', number: null, refusal: null }
    }
    return { id, state: 'accepted', number: this.accept(wire), refusal: null }
  }

  private round(): PullAnswer['round'] {
    return { id: ROUND, number: 1, state: 'open', accepted: this.entries.size, basis: BASIS }
  }

  bundle(): FieldBundle {
    const job = { id: JOB, number: 1, code: 'FE-0001', title: 'Pool yard', neededBy: null, system: 'imperial' as const, language: 'en' as const, permit: '', contract: '', buildingCode: '', gateTag: '', onsiteName: '', onsitePhone: '', emergencyName: '', emergencyPhone: '' }
    return { syncVersion: 1, storeEpoch: this.epoch, me: { accountId: WHO.accountId, name: 'Ines', role: 'inspector' }, organisation: { id: WHO.organisationId, name: 'Fence', phone: null, timeZone: 'UTC' }, job, site: { id: JOB, name: 'School', address: '', timeZone: 'UTC' }, client: { id: JOB, name: 'District' }, round: this.round(), startsFrom: null, letter: 'A', bases: [{ digest: BASIS, text: 'a basis' }], people: [], contacts: [], devices: [] }
  }

  private async request<T>(route: Route, work: () => Reply<T>): Promise<Reply<T>> {
    const mishap = (route === 'me' ? undefined : this.mishaps.shift()) ?? 'none'
    if (mishap === 'diesBefore') throw new Died()
    if (mishap === 'lost') return answer<T>(0)
    if (mishap === 'status503' || mishap === 'status401') return answer<T>(Number(mishap.slice(6)))
    if (mishap === 'writesMeanwhile') await this.meanwhile()
    const reply = work()
    if (mishap === 'diesAfter') throw new Died()
    return mishap === 'answerLost' ? answer<T>(0) : reply
  }

  readonly wire: FieldWire = {
    me: () => this.request('me', () => this.me ? answer(200, this.me) : answer<Me>(401, null, 'signInNeeded')),
    take: () => this.request('take', () => answer(200, this.bundle())),
    push: (_round, { entries, empty }) => this.request('push', () => {
      const ids = entries.map(one => headOf(one.envelope).id)
      if (this.tooLarge(ids)) return answer<PushAnswer>(413, null, 'tooLarge')
      this.pushes.push(ids)
      const results = entries.map(one => this.offer(one))
      this.empty = empty && results.every(one => one.state === 'accepted' || one.state === 'resent')
      return answer(200, { storeEpoch: this.epoch, accepted: this.entries.size, results })
    }),
    pull: (_round, after) => this.request('pull', () => {
      const entries = [...this.entries.values()].filter(one => one.number > after).slice(0, 3)
      return answer(200, { storeEpoch: this.epoch, round: this.round(), entries, more: entries.length === 3 })
    }),
    photo: (_job, digest) => this.request('photo', () => {
      this.photos.add(digest)
      return answer(200, { digest })
    }),
  }
}

let made = 0
/** An entry as the device writes it, from the real maker. */
export function makeRow<K extends EntryKind = 'note'>(more: { kind?: K, answers?: string[], photos?: string[], author?: string, payload?: Omit<PayloadOf<K>, 'salt'>, check?: string } = {}): Omit<EntryRow, 'seq'> {
  const photos: PhotoRef[] = (more.photos ?? []).map(digest => ({ digest, width: 10, height: 10, taken: { digest, at: null, origin: 'camera' } }))
  const { wire, entry } = makeEntry({
    kind: (more.kind ?? 'note') as K, id: uuidv7(), salt: (++made).toString(16).padStart(32, '0'), madeAt: '2026-12-01T09:00:00.000-05:00', organisation: WHO.organisationId, job: JOB, round: ROUND, author: more.author ?? WHO.accountId, device: WHO.device,
    element: ELEMENT, check: more.check ?? null, basis: BASIS, answers: more.answers, payload: more.payload ?? { words: `note ${made}`, photos } as unknown as Omit<PayloadOf<K>, 'salt'>,
  })
  return { id: entry.envelope.id, jobId: JOB, round: ROUND, kind: entry.envelope.kind, ...wire, names: [...entry.envelope.answers, ...entry.envelope.replaces], photos: photos.map(photo => photo.digest), state: 'waiting', offered: 0, own: 1, number: null, writtenAt: 0 }
}
