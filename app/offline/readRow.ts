import type { KeptEntry } from '#shared/entry/entry'
import { readEntry } from '#shared/entry/readEntry'
import type { EntryRow } from './fieldDatabase'

/** Reads rows of the device's database once each; asked again, only what changed is read. */
export class RowReader {
  private readonly kept = new Map<string, { envelope: string, payload: string, entry: KeptEntry | null }>()

  /** The entry of a row; null where even its envelope cannot be read by this program. */
  read(row: Pick<EntryRow, 'id' | 'envelope' | 'payload' | 'number'>): KeptEntry | null {
    const before = this.kept.get(row.id)
    if (before && before.envelope === row.envelope && before.payload === row.payload) {
      if (before.entry && before.entry.number !== row.number) before.entry = { ...before.entry, number: row.number }
      return before.entry
    }
    const read = readEntry(row, { number: row.number, mayBeErased: true })
    const entry = read.state === 'refused' ? null : read.entry
    this.kept.set(row.id, { envelope: row.envelope, payload: row.payload, entry })
    return entry
  }
}
