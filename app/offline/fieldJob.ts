import { computed, onScopeDispose, ref, shallowRef, type Ref } from 'vue'
import type { Me } from '#shared/api/account'
import type { EntryKind, KeptEntry, PayloadOf } from '#shared/entry/entry'
import { isKnown } from '#shared/entry/entry'
import { makeEntry } from '#shared/entry/makeEntry'
import type { RoundBasis } from '#shared/round/basis'
import { SYNC_VERSION, type FieldBundle } from '#shared/sync/sync'
import { uuidv7 } from 'uuidv7'
import type { FieldDraft, FieldJob } from '~/composables/useFieldJob'
import type { EntryRow } from './fieldDatabase'
import { enterField, type FieldDesk } from './fieldDesk'
import { FieldFault } from './fieldFault'
import { keepPhoto, offerAgain, spendTag, takeBackEntries, tallyOf, writeEntry, type JobTally } from './fieldStore'
import { finalPhoto } from './finalPhoto'
import { basesHere, foldHere } from './foldHere'
import { withOffset } from './instant'
import { answered, nextTagNumber, tagNumber } from './outbox'
import { RowReader } from './readRow'

const salt = () => Array.from(crypto.getRandomValues(new Uint8Array(16)), byte => byte.toString(16).padStart(2, '0')).join('')

/** Opens a job from this device's database; takes it along where it is not there and there is a signal. See useFieldJob for what each part answers. */
export function openFieldJob(jobId: string, me: Ref<Me | null>): FieldJob {
  const state = ref<'loading' | 'ready' | 'missing' | 'refused'>('loading')
  const why = ref<string | null>(null)
  const bundle = shallowRef<FieldBundle | null>(null)
  const bases = shallowRef<ReadonlyMap<string, RoundBasis>>(new Map())
  const entries = shallowRef<KeptEntry[]>([])
  const unreadable = ref(0)
  const heldBack = shallowRef<{ id: string, code: string, message: string }[]>([])
  const tally = shallowRef<JobTally>({ waiting: 0, heldBack: 0, sentAt: null })
  const walkId = ref<string | null>(null)
  const desk = shallowRef<FieldDesk | null>(null)
  const rows = new RowReader()
  let tags = 0

  const folded = computed(() => bundle.value ? foldHere(bundle.value, bases.value, entries.value) : { outcome: null, basisMissing: false })
  const outcome = computed(() => folded.value.outcome)
  const basis = computed(() => bases.value.get(outcome.value?.basis ?? bundle.value?.round.basis ?? '') ?? null)

  function take(next: FieldBundle) {
    if (bundle.value === next) return
    bases.value = basesHere(next, bases.value)
    bundle.value = next
  }

  let reading: Promise<void> | null = null
  let readAgain = false
  /** Reads this job from the database; several calls at once read once more, not several times. */
  function refresh(): Promise<void> {
    readAgain = true
    return reading ??= (async () => {
      while (readAgain) {
        readAgain = false
        await readOnce()
      }
    })().finally(() => { reading = null })
  }
  async function readOnce() {
    const { db } = desk.value!
    const job = await db.jobs.get(jobId)
    if (!job) return
    const round = job.bundle.round.id
    const found = await db.entries.where('[jobId+round]').equals([jobId, round]).toArray()
    const photosBack = await db.photos.where('[jobId+state]').equals([jobId, 'heldBack']).toArray()
    const entriesBack = await db.entries.where('[jobId+state]').equals([jobId, 'heldBack']).toArray()
    tally.value = await tallyOf(db, jobId)
    take(job.bundle)
    tags = Math.max(tags, job.tags)
    walkId.value = job.walk?.round === round ? job.walk.id : null
    const read = found.map(row => rows.read(row))
    unreadable.value = read.filter(entry => entry === null).length
    entries.value = read.filter(entry => entry !== null)
    heldBack.value = [...entriesBack.map(row => ({ id: row.id, ...row.refusal! })), ...photosBack.map(row => ({ id: row.digest, ...row.refusal! }))]
    state.value = 'ready'
  }

  async function begin() {
    const entered = await enterField(me)
    if (entered.state === 'shut') {
      why.value = entered.why
      state.value = entered.why === 'noSignal' ? 'missing' : 'refused'
      return
    }
    desk.value = entered.desk
    const { db, sender } = entered.desk
    onChangeStop = sender.onChange(changed => changed === jobId && void refresh())
    const here = await db.jobs.get(jobId)
    if (here) await refresh()
    // With a signal the newest round, bases and people are taken along again; nobody waits for it where the job is here.
    const reply = await sender.take(jobId)
    if (here) return
    const end = answered(reply.status)
    if (end === 'through') return refresh()
    why.value = end === 'again' ? 'noSignal' : reply.status === 401 ? 'signIn' : reply.problem?.code ?? 'notFound'
    state.value = end === 'pause' ? 'refused' : 'missing'
  }
  let onChangeStop = () => {}
  onScopeDispose(() => {
    onChangeStop()
    for (const url of urls.values()) void url.then(one => one?.startsWith('blob:') && URL.revokeObjectURL(one))
  })
  void begin().catch((error) => {
    console.error(error)
    why.value = error instanceof FieldFault ? error.code : 'storageShut'
    state.value = 'missing'
  })

  /** What is needed to write, or a sentence why not yet. */
  function ready() {
    const [of, at] = [bundle.value, desk.value]
    if (!of || !at || state.value !== 'ready') throw new FieldFault('notReady')
    return { of, at }
  }

  async function write<K extends EntryKind>(draft: FieldDraft<K>, opens?: string): Promise<string> {
    const { of, at } = ready()
    const { kind, element, check, place, answers, replaces } = draft
    const inForce = ('basis' in draft.payload ? (draft.payload as unknown as PayloadOf<'basisChanged'>).basis : draft.basis) ?? outcome.value?.basis ?? of.round.basis
    const { wire, entry } = makeEntry({
      kind, element, check, place, answers, replaces, payload: draft.payload, id: uuidv7(), salt: salt(), madeAt: withOffset(new Date()),
      organisation: of.organisation.id, job: jobId, round: of.round.id, author: of.me.accountId, device: at.sender.who.device, walk: opens ?? walkId.value, basis: inForce,
    })
    const { photos = [], tag } = entry.payload as { photos?: { digest: string }[], tag?: string }
    const row: Omit<EntryRow, 'seq'> = {
      id: entry.envelope.id, jobId, round: of.round.id, kind, ...wire, names: [...entry.envelope.answers, ...entry.envelope.replaces], photos: photos.map(photo => photo.digest),
      state: 'waiting', offered: 0, own: 1, number: null, writtenAt: Date.now(),
    }
    if (tag) tags = Math.max(tags, tagNumber(tag, of.letter))
    await writeEntry(at.db, row, { tags, ...(opens && { walk: { id: opens, round: of.round.id } }) })
    const kept = rows.read(row)
    // A refresh that ran meanwhile may have it already.
    if (kept && !entries.value.some(one => one.envelope.id === row.id)) entries.value = [...entries.value, kept]
    at.sender.wrote(jobId, kind === 'dangerNow')
    tally.value = await tallyOf(at.db, jobId)
    return row.id
  }

  let starting: Promise<void> | null = null
  function startWalk(again = false): Promise<void> {
    if (walkId.value !== null && !again) return Promise.resolve()
    return starting ??= (async () => {
      const { of, at } = ready()
      const id = uuidv7()
      await write({ kind: 'walkOpened', payload: { basis: outcome.value?.basis ?? of.round.basis, device: at.sender.who.name } }, id)
      walkId.value = id
    })().finally(() => { starting = null })
  }

  function nextTag(): string {
    const { of, at } = ready()
    // Local storage is the one place that every tab of this device sees at once.
    const key = `smoothside tags ${at.sender.who.device} ${jobId}`
    const written = entries.value.flatMap(entry => isKnown(entry) && entry.envelope.kind === 'reading' ? (entry.payload as PayloadOf<'reading'> | null)?.tag ?? [] : [])
    tags = nextTagNumber(of.letter, [...written, ...outcome.value?.deficiencies.map(one => one.tag) ?? []], tags, Number(localStorage.getItem(key)))
    localStorage.setItem(key, String(tags))
    void spendTag(at.db, jobId, tags)
    return of.letter + tags
  }

  async function takeBack(ids: string[]): Promise<boolean> {
    const { at } = ready()
    if (!await takeBackEntries(at.db, jobId, ids)) return false
    entries.value = entries.value.filter(entry => !ids.includes(entry.envelope.id))
    at.sender.wrote(jobId, false)
    tally.value = await tallyOf(at.db, jobId)
    return true
  }

  const urls = new Map<string, Promise<string | null>>()
  const showBytes = (bytes: Uint8Array) => URL.createObjectURL(new Blob([bytes as BlobPart], { type: 'image/jpeg' }))
  async function addPhoto(file: Blob, origin: 'camera' | 'gallery') {
    const { at } = ready()
    const { ref: photo, bytes } = await finalPhoto(file, origin)
    await keepPhoto(at.db, { digest: photo.digest, jobId, bytes, writtenAt: Date.now() })
    return photo
  }
  async function photoUrl(digest: string): Promise<string | null> {
    const at = desk.value
    if (!at) return null
    const before = await urls.get(digest)
    if (before) return before
    const found = at.db.photos.get(digest).then(photo => photo ? showBytes(photo.bytes) : at.sender.online.value ? `/api/photos/${digest}` : null)
    urls.set(digest, found)
    return found
  }

  return {
    state, why, bundle, basis, outcome, line: computed(() => outcome.value?.line ?? basis.value?.line ?? null), entries, walkId,
    startWalk, write: draft => write(draft), nextTag, takeBack, addPhoto, photoUrl,
    tally: computed(() => ({ ...tally.value, sentAt: tally.value.sentAt === null ? null : new Date(tally.value.sentAt).toISOString() })),
    sendNow: async () => desk.value?.sender.sendNow(),
    offerAgain: async () => {
      const { at } = ready()
      await offerAgain(at.db, jobId)
      await at.sender.sendNow()
      await refresh()
    },
    heldBack: computed(() => heldBack.value),
    cannotSign: computed(() => (bundle.value?.syncVersion ?? 0) > SYNC_VERSION ? 'newerProgram' : unreadable.value > 0 || (outcome.value?.unknown.length ?? 0) > 0 ? 'unknownEntry' : heldBack.value.length > 0 ? 'heldBack' : folded.value.basisMissing ? 'basisMissing' : null),
    online: computed(() => desk.value?.sender.online.value ?? navigator.onLine),
    sending: computed(() => desk.value?.sender.sending.value ?? false),
    trouble: computed(() => desk.value?.sender.trouble.value ?? null),
  }
}
