import type { Bound, Limit } from '../../limit/limit'
import { INCH, MILLIMETRE, type Length, type System } from '../../measure/length'
import type { Role } from '../displayList'
import type { LiveInput, LiveLimit, Say } from './live'
import { figureKey } from '../../limit/boundDistance'
import { judge, type Judgement } from '../../limit/judge'
import { formatLength } from '../../measure/formatLength'

/** A limit as a drawing shows it: on the datum of the reading, with its words and what the reading comes to against it. */
export interface PlacedLimit {
  /** Stretches that conform, on the datum of the reading; ends without a limit are infinite. */
  allowed: { low: number, high: number }[]
  ends: Length[]
  words: string
  basis: string
  role: Extract<Role, 'pine' | 'brass'>
  wash: Extract<Role, 'pine-wash' | 'brass-wash'>
  /** Against the reading; null before there is one. */
  judgement: Judgement | null
}

/** A length as a drawing writes it: whole where a tape or a source can show it whole, else rounded as usual, finer where that would hide its side of a limit. */
export function figure(amount: Length, system: System, beside: readonly Length[] = []): string {
  // 1/64 in, 0.001 in; 1/10 mm. What is none of these is no reading, and has no whole figure to be held to.
  const whole = system === 'imperial' ? amount % (INCH / 64) === 0 || amount % (INCH / 1000) === 0 : amount % (MILLIMETRE / 10) === 0
  return formatLength(amount, { system, beside: whole ? [amount] : beside.filter(other => other !== amount) }).text
}

/** The same without its unit, for dimensions. */
export function bareFigure(amount: Length, system: System, beside: readonly Length[] = []): string {
  return figure(amount, system, beside).replace(/ (in|mm)$/, '')
}

/** Limits brought to the datum of the reading. The first is pine; all others brass. Throws what `judge` throws. */
export function placeLimits({ limits, reading, system, say }: Pick<LiveInput, 'limits' | 'reading' | 'system' | 'say'>): PlacedLimit[] {
  return limits.map(({ limit, shift = 0 }: LiveLimit, index) => {
    const { low, high, avoid } = limit
    const at = (bound: Bound) => bound[figureKey(bound, limit.unit, system, limit.id)]! + shift
    const outer = { low: low ? at(low) : -Infinity, high: high ? at(high) : Infinity }
    const parts = avoid ? [{ low: outer.low, high: at(avoid.low) }, { low: at(avoid.high), high: outer.high }] : [outer]
    return {
      allowed: parts.filter(part => part.low <= part.high),
      ends: [low, high, avoid?.low, avoid?.high].flatMap(bound => bound ? [at(bound)] : []),
      words: limitWords(limit, system, say),
      basis: [limit.basis.name, limit.basis.citation].filter(Boolean).join(' · '),
      role: index === 0 ? 'pine' : 'brass',
      wash: index === 0 ? 'pine-wash' : 'brass-wash',
      judgement: reading === null ? null : judge({ amount: reading - shift, system }, limit),
    }
  })
}

/** A limit in words, as its source gives its figures. */
export function limitWords({ low, high, avoid, unit, id }: Limit, system: System, say: Say): string {
  const shown = (bound: Bound) => {
    const key = figureKey(bound, unit, system, id)
    return key === 'plain' ? String(bound.plain) : figure(bound[key]!, key, [bound[key]!])
  }
  // A unit that both ends share is said once.
  const short = (from: Bound, to: Bound) => shown(from).replace(/ (in|mm)$/, unitOf => shown(to).endsWith(unitOf) ? '' : unitOf)
  const range = low && high ? say('between', { low: short(low, high), high: shown(high) })
    : low ? say(low.inclusive ? 'atLeast' : 'over', { amount: shown(low) })
      : high ? say(high.inclusive ? 'atMost' : 'under', { amount: shown(high) }) : ''
  return [range, avoid ? say('keepOut', { low: short(avoid.low, avoid.high), high: shown(avoid.high) }) : ''].filter(Boolean).join(', ')
}

/**
 * The limit whose margin a drawing dimensions: the first one where it is not met, else the one that is missed by most, else the nearest. Null without reading or limits.
 */
export function governing(placed: readonly PlacedLimit[]): (PlacedLimit & { judgement: Judgement }) | null {
  const judged = placed.flatMap(limit => limit.judgement && limit.judgement.margin !== null ? [{ ...limit, judgement: limit.judgement }] : [])
  const [first] = judged
  if (first?.judgement.verdict === 'doesNotConform') return first
  const missed = judged.filter(({ judgement }) => judgement.verdict !== 'conforms')
  return (missed.length > 0 ? missed : judged).reduce<(typeof judged)[number] | null>((worst, next) => worst && worst.judgement.margin! <= next.judgement.margin! ? worst : next, null)
}

/** A margin in words ("3/8 in short"), and the colour that repeats it. */
export function marginWords(limit: PlacedLimit | null, system: System, say: Say): { words: string, role: Role } {
  const judgement = limit?.judgement
  if (!judgement || judgement.margin === null) return { words: '', role: 'soft' }
  const { margin, verdict, end } = judgement
  const amount = figure(Math.abs(margin), system, [0])
  if (verdict === 'conforms') return { words: margin === 0 ? say('atLimit') : say('inside', { amount }), role: 'pine' }
  if (margin === 0) return { words: say('atLimitOut'), role: 'rust' }
  return { words: say(end === 'low' ? 'short' : end === 'high' ? 'tooMuch' : 'inBand', { amount }), role: 'rust' }
}

/** Where two limits leave nothing in common: the gap between them, lower end first; null where they do. */
export function clashOf(placed: readonly PlacedLimit[]): { from: Length, to: Length } | null {
  const low = Math.max(...placed.map(limit => Math.min(...limit.allowed.map(part => part.low))))
  const high = Math.min(...placed.map(limit => Math.max(...limit.allowed.map(part => part.high))))
  return Number.isFinite(low) && Number.isFinite(high) && low > high ? { from: high, to: low } : null
}

/** All that a drawing says in one line: the reading, each limit with whose it is and the margin, a clash. */
export function summaryOf(input: Pick<LiveInput, 'reading' | 'system' | 'say'>, placed: readonly PlacedLimit[], shown?: string): string {
  const { reading, system, say } = input
  const read = shown ?? (reading === null ? say('noReading') : figure(reading, system, placed.flatMap(({ ends }) => ends)))
  const limits = placed.length === 0 ? [say('noLimit')] : placed.map((limit) => {
    const margin = marginWords(limit, system, say).words
    return `${limit.words} (${limit.basis})${margin && `, ${margin}`}`
  })
  const clash = clashOf(placed)
  return [read, ...limits, clash ? say('clash', { amount: figure(clash.to - clash.from, system, [0]) }) : ''].filter(Boolean).join('; ')
}
