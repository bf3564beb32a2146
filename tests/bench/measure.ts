import { existsSync, readFileSync } from 'node:fs'

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
  /** The same ratio of medians in processor time, which other programs on the machine disturb less; absent where it cannot be told. */
  cpuRatio?: number
}

export function median(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b)
  const middle = sorted.length >> 1
  return sorted.length % 2 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2
}

/** Milliseconds of the processors' time that other processes have taken so far, such as those of the database. */
export type Beside = () => number
const nothing: Beside = () => 0

/** Milliseconds that the work takes once, by the clock and of the processors' time. */
export async function time(work: () => unknown, beside: Beside = nothing): Promise<{ clock: number, cpu: number }> {
  const [others, used, begin] = [beside(), process.cpuUsage(), performance.now()]
  await work()
  const clock = performance.now() - begin
  const { user, system } = process.cpuUsage(used)
  return { clock, cpu: (user + system) / 1000 + beside() - others }
}

/** The processors' time of these processes (Linux's /proc, in its hundredths of a second); null where there is no such thing. */
export function processorTimeOf(pids: readonly number[]): Beside | null {
  const used = (pid: number) => readFileSync(`/proc/${pid}/stat`, 'utf8').split(') ')[1]!.split(' ').slice(11, 13).reduce((sum, ticks) => sum + Number(ticks) * 10, 0)
  return existsSync('/proc/self/stat') ? () => pids.reduce((sum, pid) => sum + used(pid), 0) : null
}

/**
 * Measures the work and its counterpart by turns, so that a busy moment of the machine meets both, and compares medians.
 * `rounds` turns are measured after `warmUps` that are not. `beside`: the other processes that work for it; null where their time cannot be told.
 */
export async function compare(name: string, limit: number | null, works: { ours: () => unknown, base: () => unknown }, { rounds = 15, warmUps = 3, beside = nothing }: { rounds?: number, warmUps?: number, beside?: Beside | null } = {}): Promise<Figure> {
  const ours: Awaited<ReturnType<typeof time>>[] = []
  const base: typeof ours = []
  for (let round = 0; round < warmUps + rounds; round++) {
    const one = await time(works.ours, beside ?? nothing)
    const other = await time(works.base, beside ?? nothing)
    if (round >= warmUps) {
      ours.push(one)
      base.push(other)
    }
  }
  const of = (list: typeof ours, which: 'clock' | 'cpu') => median(list.map(one => one[which]))
  return {
    name, ours: of(ours, 'clock'), base: of(base, 'clock'), ratio: of(ours, 'clock') / of(base, 'clock'), limit,
    ...(beside ? { cpuRatio: of(ours, 'cpu') / of(base, 'cpu') } : {}),
  }
}
