/** One figure of a bench: a ratio measured in one run, against what it may be. */
export interface Figure {
  name: string
  /** What the measured work took, median in milliseconds. */
  ours: number
  /** What the plain counterpart took in the same run, median in milliseconds. */
  base: number
  ratio: number
  /** The ratio that is to be reached. */
  limit: number
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = sorted.length >> 1
  return sorted.length % 2 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
}

/** Milliseconds that the work takes once. */
export async function time(work: () => unknown): Promise<number> {
  const begin = performance.now()
  await work()
  return performance.now() - begin
}

/**
 * Measures the work and its counterpart by turns, so that a busy moment of the machine meets both, and compares medians.
 * `rounds` turns are measured after `warmUps` that are not.
 */
export async function compare(name: string, limit: number, works: { ours: () => unknown, base: () => unknown }, { rounds = 15, warmUps = 3 } = {}): Promise<Figure> {
  const ours: number[] = []
  const base: number[] = []
  for (let round = 0; round < warmUps + rounds; round++) {
    const one = await time(works.ours)
    const other = await time(works.base)
    if (round >= warmUps) {
      ours.push(one)
      base.push(other)
    }
  }
  return { name, ours: median(ours), base: median(base), ratio: median(ours) / median(base), limit }
}
