/** One figure of a bench: a ratio measured in one run, against what it may be. */
export interface Figure {
  name: string
  /** What the measured work took, median in milliseconds. */
  ours: number
  /** What the plain counterpart took in the same run, median in milliseconds. */
  base: number
  ratio: number
  /** The ratio that is to be reached; null where none was set and it is only shown. */
  limit: number | null
  /** The same ratio of medians in processor time of this process, which other programs on the machine disturb less; absent where another process works too. */
  cpuRatio?: number
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = sorted.length >> 1
  return sorted.length % 2 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
}

/** Milliseconds that the work takes once, by the clock and of the processors' time. */
export async function time(work: () => unknown): Promise<{ clock: number, cpu: number }> {
  const [begin, used] = [performance.now(), process.cpuUsage()]
  await work()
  const { user, system } = process.cpuUsage(used)
  return { clock: performance.now() - begin, cpu: (user + system) / 1000 }
}

/**
 * Measures the work and its counterpart by turns, so that a busy moment of the machine meets both, and compares medians.
 * `rounds` turns are measured after `warmUps` that are not. `alone`: all the work is done in this process, so its processor time tells.
 */
export async function compare(name: string, limit: number | null, works: { ours: () => unknown, base: () => unknown }, { rounds = 15, warmUps = 3, alone = true } = {}): Promise<Figure> {
  const ours: Awaited<ReturnType<typeof time>>[] = []
  const base: typeof ours = []
  for (let round = 0; round < warmUps + rounds; round++) {
    const one = await time(works.ours)
    const other = await time(works.base)
    if (round >= warmUps) {
      ours.push(one)
      base.push(other)
    }
  }
  const of = (list: typeof ours, which: 'clock' | 'cpu') => median(list.map(one => one[which]))
  return {
    name, ours: of(ours, 'clock'), base: of(base, 'clock'), ratio: of(ours, 'clock') / of(base, 'clock'), limit,
    ...(alone ? { cpuRatio: of(ours, 'cpu') / of(base, 'cpu') } : {}),
  }
}
