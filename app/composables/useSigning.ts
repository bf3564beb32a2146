import type { Entry, KeptEntry, Meaning, PayloadOf, PhotoRef } from '#shared/entry/entry'
import { isKnown, MEANINGS } from '#shared/entry/entry'
import type { SignScope } from '#shared/round/readyToSign'
import { signSheetSchema } from '#shared/round/signSheet'
import type { FieldBundle } from '#shared/sync/sync'

export type Strokes = NonNullable<PayloadOf<'signature'>['strokes']>

/** Strokes as the entry keeps them: integers, in hundredths of the pad's height, ms since the first point. Points and strokes beyond what an entry holds are thinned evenly. */
export function strokesOf(groups: readonly { points: readonly { x: number, y: number, time: number }[] }[], height: number): Strokes {
  const first = groups[0]?.points[0]?.time ?? 0
  const at = (length: number) => Math.round(length / height * 100)
  return groups.filter(group => group.points.length > 0).slice(0, 200).map(({ points }) => {
    const step = Math.ceil(points.length / 4000)
    return points.filter((_, i) => i % step === 0).map(({ x, y, time }) => ({ x: at(x), y: at(y), t: Math.max(0, Math.round(time - first)) }))
  })
}

/** Who may sign on this device. */
export interface Signer {
  key: string
  /** `own`: the person whose device it is; `contact`: of the client; `ours`: of the organisation; `other`: by name alone. */
  as: 'own' | 'contact' | 'ours' | 'other'
  account: string | null
  name: string
  title: string
  /** Named by the client to accept deviations. */
  accepts: boolean
}

export function signersOf({ me, contacts, people }: Pick<FieldBundle, 'me' | 'contacts' | 'people'>): Signer[] {
  return [
    { key: 'me', as: 'own' as const, account: me.accountId, name: me.name, title: '', accepts: false },
    ...contacts.map(one => ({ key: one.id, as: 'contact' as const, account: one.accountId, name: one.name, title: one.title, accepts: one.accepts })),
    ...people.filter(one => one.accountId !== me.accountId).map(one => ({ key: one.accountId, as: 'ours' as const, account: one.accountId, name: one.name, title: '', accepts: false })),
    { key: 'other', as: 'other' as const, account: null, name: '', title: '', accepts: false },
  ]
}

/** Each meaning with the reason why this signer cannot choose it; null where they can. */
export function meaningsFor(signer: Pick<Signer, 'as' | 'accepts'>, offered: number): { meaning: Meaning, whyNot: 'ownersOnly' | 'noneOffered' | 'notNamed' | null }[] {
  const ours = signer.as === 'own' || signer.as === 'ours'
  return MEANINGS.map(meaning => ({
    meaning,
    whyNot: meaning === 'acceptsWork' && ours ? 'ownersOnly' as const
      : meaning !== 'acceptsDeviation' ? null
        : offered === 0 ? 'noneOffered' as const : signer.accepts ? null : 'notNamed' as const,
  }))
}

const isSignature = (entry: KeptEntry): entry is Entry<'signature'> => isKnown(entry) && entry.envelope.kind === 'signature'

/** Signatures that no later one replaced, each with the number of entries that came after it and the scope it was given for. */
export function signaturesNow(entries: readonly KeptEntry[]): { entry: Entry<'signature'>, payload: PayloadOf<'signature'>, scope: SignScope | null, after: number }[] {
  const replaced = new Set(entries.flatMap(entry => entry.envelope.replaces))
  const others = entries.filter(entry => entry.envelope.kind !== 'signature')
  return entries.filter(isSignature).filter(entry => entry.payload !== null && !replaced.has(entry.envelope.id)).map((entry) => {
    const payload = entry.payload!
    const sheet = payload.sheet === null ? null : signSheetSchema.parse(JSON.parse(payload.sheet))
    const signed = new Set(sheet?.entries)
    return { entry, payload, scope: sheet?.scope ?? null, after: sheet ? others.filter(one => !signed.has(one.digest)).length : 0 }
  })
}

/** Earlier words of the same signer that a new one takes the place of: the same meaning, and that they were absent, refused or sign later. */
export function replacedSignatures(entries: readonly KeptEntry[], signer: { account: string | null, name: string }, meaning: Meaning): string[] {
  return signaturesNow(entries).filter(({ payload }) => {
    const same = signer.account !== null ? payload.signer.account === signer.account : payload.signer.account === null && payload.signer.name === signer.name.trim()
    return same && (payload.state !== 'signed' || payload.meaning === meaning)
  }).map(one => one.entry.envelope.id)
}

/** Every picture of the round once, with the entry that first names it. */
export function picturesOf(entries: readonly KeptEntry[]): { photo: PhotoRef, entry: KeptEntry }[] {
  const found = new Map<string, { photo: PhotoRef, entry: KeptEntry }>()
  for (const entry of entries) {
    if (!isKnown(entry) || entry.payload === null || !('photos' in entry.payload)) continue
    for (const photo of entry.payload.photos as PhotoRef[]) if (!found.has(photo.digest)) found.set(photo.digest, { photo, entry })
  }
  return [...found.values()]
}

/** What one decides before signing, kept while the program is open: which record, and what was seen in each picture. */
export function useSigning(jobId: string) {
  return {
    scope: useState<SignScope>(`sign-scope ${jobId}`, () => 'interim'),
    seen: useState<Record<string, 'nobody' | 'somebody'>>(`sign-seen ${jobId}`, () => ({})),
  }
}
