import type { Figure } from './measure'
import type { PayloadOf, ReadingValue } from '#shared/entry/entry'
import type { Bound, Limit } from '#shared/limit/limit'
import { judge } from '#shared/limit/judge'
import { nextRandom } from '#shared/sampling/pickRandom'
import { compare } from './measure'

const INCH = 8_128_000
const basis = { kind: 'builtIn', name: 'made up for this measurement' } as const
const bound = (inches: number, millimetres: number): Bound => ({ imperial: inches * INCH, metric: millimetres * 320_000, inclusive: true })
const limit = (id: string, parts: Partial<Limit>): Limit => ({ id, measurand: id, datum: 'ground', unit: 'length', low: null, high: null, avoid: null, basis, ...parts })

/** Limits as a round's basis has them: one-sided, two-sided, a band, and two sources on one measurand. */
const limits: Record<string, Limit> = {
  latch: limit('latch', { low: bound(54, 1372) }),
  gap: limit('gap', { high: bound(2, 51) }),
  reach: limit('reach', { low: bound(34, 865), high: bound(48, 1220) }),
  heads: limit('opening', { avoid: { low: { imperial: 3.5 * INCH, inclusive: false }, high: { imperial: 9 * INCH, inclusive: false } } }),
  sphere: limit('opening', { high: { imperial: 4 * INCH, inclusive: false } }),
}
const tasks = [['latch'], ['gap'], ['reach'], ['sphere', 'heads']]
const guarded = { acceptance: 'guarded' } as const

type Measured = Extract<ReadingValue, { method: 'measure' }>

/** 10,000 readings, half of them guarded, against JSON.parse of the same readings as they are stored: their payloads, without the envelopes, in one text. */
export default async function bench(): Promise<Figure[]> {
  let state = 20_261_201
  const readings: Measured[] = Array.from({ length: 10_000 }, (_, index) => {
    state = nextRandom(state)
    const sixteenths = state % 1000
    return { method: 'measure', amount: sixteenths * INCH / 16, text: `${Math.floor(sixteenths / 16)} ${sixteenths % 16}/16 in`, system: 'imperial', ...(index % 2 ? { uncertainty: INCH / 16, instrument: 'tape, 25 ft' } : {}) }
  })
  const payloads = readings.map((value, index): PayloadOf<'reading'> => ({ salt: String(index).padStart(32, '5c0ffee7'), value, photos: [] }))
  const json = JSON.stringify(payloads)
  const options = tasks.map(keys => [{ keys }, { keys, ...guarded }] as const)
  let conforming = 0
  const ours = () => {
    for (let index = 0; index < readings.length; index++) {
      const reading = readings[index]!
      if (judge(reading, limits, options[index % 4]![reading.uncertainty === undefined ? 0 : 1]).verdict === 'conforms') conforming++
    }
  }
  return [await compare('Judging 10,000 readings, against JSON.parse of their payloads', 1 / 3, { ours, base: () => JSON.parse(json) }, { rounds: 45, warmUps: 15 })].filter(() => conforming > 0)
}
