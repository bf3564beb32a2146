/** An instant as a clock at the place shows it, ISO 8601 with the offset of that day; `Z` never, so that the record can name the zone. */
export function instantAt(at: Date, timeZone: string): string {
  const parts = Object.fromEntries(new Intl.DateTimeFormat('en-US', { timeZone, hourCycle: 'h23', year: 'numeric', month: '2-digit', day: '2-digit', hour: '2-digit', minute: '2-digit', second: '2-digit', timeZoneName: 'longOffset' })
    .formatToParts(at).map(part => [part.type, part.value]))
  const offset = parts.timeZoneName === 'GMT' ? '+00:00' : parts.timeZoneName!.replace('GMT', '')
  return `${parts.year}-${parts.month}-${parts.day}T${parts.hour}:${parts.minute}:${parts.second}${offset}`
}

/** What people at the place call the offsets that these instants carry ("-05:00" is EST there); offsets of elsewhere are left to stand as they are. */
export function zoneNames(instants: string[], timeZone: string): Record<string, string> {
  const names: Record<string, string> = {}
  for (const instant of instants) {
    const offset = /([+-]\d\d:\d\d|Z)$/.exec(instant)?.[1]
    if (!offset || names[offset]) continue
    const at = new Date(instant)
    if (offset === 'Z' || offset === '+00:00') names[offset] = 'UTC'
    else if (instantAt(at, timeZone).endsWith(offset)) {
      const name = new Intl.DateTimeFormat('en-US', { timeZone, timeZoneName: 'short' }).formatToParts(at).find(part => part.type === 'timeZoneName')!.value
      if (/^[A-Z]{2,5}$/.test(name)) names[offset] = name
    }
  }
  return names
}
