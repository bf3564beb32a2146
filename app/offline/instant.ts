const two = (n: number) => String(Math.floor(n)).padStart(2, '0')

/** An instant as this device's clock shows it, with its offset: 2026-12-01T15:04:05.123-05:00. */
export function withOffset(at: Date): string {
  const minutes = -at.getTimezoneOffset()
  const local = new Date(at.getTime() + minutes * 60_000).toISOString().slice(0, -1)
  return `${local}${minutes < 0 ? '-' : '+'}${two(Math.abs(minutes) / 60)}:${two(Math.abs(minutes) % 60)}`
}
