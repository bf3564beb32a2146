/** A label that wants to stand centred at `centre`, `width` wide. */
export interface WantedLabel { centre: number, width: number }
/** Where it came to stand: its left edge and its lane from 0; undefined when there was no room for it. */
export interface PlacedLabel { left: number, lane: number }

/**
 * Sets labels under a row so that none covers another: each in the first of `lanes` lanes where it fits, moved sideways by at most `shift`,
 * inside `from` to `to`. Labels come in order from left to right. Undefined stands for one without room.
 */
export function placeLabels(labels: readonly WantedLabel[], { from, to, lanes, shift, gap = 8 }: { from: number, to: number, lanes: number, shift: number, gap?: number }): (PlacedLabel | undefined)[] {
  const ends: number[] = Array.from({ length: lanes }, () => -Infinity)
  return labels.map(({ centre, width }) => {
    const wanted = Math.max(from, Math.min(to - width, centre - width / 2))
    for (let lane = 0; lane < lanes; lane++) {
      const left = Math.max(wanted, ends[lane]! + gap)
      if (left - wanted > shift || left + width > to + 0.01) continue
      ends[lane] = left + width
      return { left, lane }
    }
    return undefined
  })
}

/** A tag that flies from a stem at `stem`, `width` wide, its place on the fence at `top`. */
export interface WantedTag { stem: number, width: number, top: number }

/**
 * Hangs tags over a row so that no tape covers another and no stem crosses a tape: from the right to the left, one that would cover its right
 * neighbour flies above it. Answers left edge and y of each tape; `undefined` beyond `lanes` lanes, for the caller to fold.
 */
export function placeTags(tags: readonly WantedTag[], { to, lanes, rise, height, gap = 4 }: { to: number, lanes: number, rise: number, height: number, gap?: number }): ({ left: number, y: number } | undefined)[] {
  const order = tags.map((_, i) => i).sort((a, b) => tags[b]!.stem - tags[a]!.stem || b - a)
  const set: { left: number, y: number, lane: number }[] = []
  const placed: ({ left: number, y: number } | undefined)[] = tags.map(() => undefined)
  for (const i of order) {
    const { stem, width, top } = tags[i]!
    const left = Math.min(stem, to - width)
    const under = set.filter(other => other.left < left + width + gap)
    const lane = Math.max(-1, ...under.map(other => other.lane)) + 1
    if (lane >= lanes) continue
    const y = Math.min(top - rise, ...under.map(other => other.y - height - gap))
    set.push({ left, y, lane })
    placed[i] = { left, y }
  }
  return placed
}
