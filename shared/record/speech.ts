import type { Place, ReadingValue } from '../entry/entry'
import { figureKey } from '../limit/boundDistance'
import type { Basis, Bound, Limit, Unit } from '../limit/limit'
import type { LineElement } from '../line/line'
import { formatLength } from '../measure/formatLength'
import type { Length, System } from '../measure/length'
import type { RecordCheck, RecordReading } from './record'
import { fill, listed, type Wording } from './wording'

/** What a document needs to speak of amounts, places and times: its wording, its system, and the names of offsets. */
export interface Voice { wording: Wording, system: System, zones: Record<string, string> }

/** Says amounts, limits, margins, places and times in the words of one record. Says what the record holds; decides nothing. */
export class Speech {
  readonly w: Wording
  constructor(readonly voice: Voice) {
    this.w = voice.wording
  }

  /** An amount in the unit of its check; `beside` lists amounts that it must not seem equal to when it is not. */
  amount(value: number, unit: Unit | null, { system = this.voice.system, beside = [] }: { system?: System, beside?: readonly number[] } = {}): string {
    if (unit === 'length') return formatLength(value, { system, beside }).text
    if (unit === 'time') return `${thousandths(value)} s`
    if (unit === 'angle') return `${thousandths(value)}°`
    if (unit === 'force') return `${thousandths(value)} ${system === 'imperial' ? 'lbf' : 'N'}`
    return String(value)
  }

  length(value: Length): string {
    return this.amount(value, 'length')
  }

  /** A limit as it holds in one system, with what it is taken from. */
  limit(limit: Limit, system = this.voice.system): string {
    const { bounds, datums, phrases } = this.w
    const say = (bound: Bound) => {
      const key = figureKey(bound, limit.unit, system, limit.id)
      const own = key === 'plain' ? system : key
      return this.amount(bound[key]!, limit.unit, { system: own, beside: [bound[key]!] })
    }
    const parts = [
      ...(limit.low && limit.high && limit.low.inclusive && limit.high.inclusive
        ? [fill(bounds.between, { low: say(limit.low), high: say(limit.high) })]
        : [
            ...(limit.low ? [fill(limit.low.inclusive ? bounds.atLeast : bounds.over, { x: say(limit.low) })] : []),
            ...(limit.high ? [fill(limit.high.inclusive ? bounds.atMost : bounds.under, { x: say(limit.high) })] : []),
          ]),
      ...(limit.avoid ? [fill(bounds.outside, { low: say(limit.avoid.low), high: say(limit.avoid.high) })] : []),
    ]
    return fill(phrases.limit, { limit: listed(parts, this.w.and), datum: datums[limit.datum] ?? '' }).trim()
  }

  /** Whose a limit is, with citation, edition and who confirmed it. */
  basis(basis: Basis): string {
    const { phrases } = this.w
    const parts = [basis.name, basis.citation, basis.edition].filter(part => part)
    const confirmed = basis.confirmedBy && basis.confirmedOn ? `; ${fill(phrases.confirmed, { name: basis.confirmedBy, on: this.day(basis.confirmedOn) })}` : ''
    return `${parts.join(', ')}${confirmed}`
  }

  /** The reading itself, large on the page. */
  reading(value: ReadingValue, check: Pick<RecordCheck, 'unit'>, limits: Limit[] = []): string {
    const { phrases, findings } = this.w
    switch (value.method) {
      case 'look': return value.found === 'clear' ? phrases.clear : value.finding ? findings[value.finding] : findings.other
      case 'count': return String(value.amount)
      case 'trial': return fill(phrases.ofTries, { good: sum(value.tries.map(each => each.good)), of: sum(value.tries.map(each => each.of)) })
      case 'template': return fill(value.went === 'passed' ? phrases.gaugePassed : phrases.gaugeStopped, { gauge: value.gauge })
      case 'measure': return this.amount(value.amount, check.unit, { system: value.system, beside: figures(limits, value.system) })
    }
  }

  /** How far inside or outside: "3/8 in short"; null where nothing was to be met. */
  margin(reading: RecordReading, check: Pick<RecordCheck, 'unit'>, limits: Record<string, Limit>): string | null {
    const { phrases } = this.w
    const { margin, value } = reading
    const limit = reading.limit === null ? undefined : limits[reading.limit]
    if (margin === null || !limit || (value.method !== 'measure' && value.method !== 'count')) return null
    const system = value.method === 'measure' ? value.system : this.voice.system
    if (margin === 0) return phrases.atLimit
    const x = this.amount(Math.abs(margin), check.unit, { system, beside: [0] })
    if (margin > 0) return fill(phrases.inside, { x })
    const short = (bound: Bound | null) => bound !== null && value.amount < bound[figureKey(bound, limit.unit, system, limit.id)]!
    const over = (bound: Bound | null) => bound !== null && value.amount > bound[figureKey(bound, limit.unit, system, limit.id)]!
    return fill(short(limit.low) ? phrases.short : over(limit.high) ? phrases.over : phrases.inBand, { x })
  }

  place(place: Place | null): string {
    if (!place) return ''
    const { phrases, faces } = this.w
    return [
      ...(place.bay === null ? [] : [fill(phrases.bay, { n: place.bay })]),
      ...(place.from ? [fill(place.from.end === 'start' ? phrases.fromStart : phrases.fromEnd, { x: this.length(place.from.distance) })] : []),
      ...(place.height === null ? [] : [fill(phrases.atHeight, { x: this.length(place.height) })]),
      ...(place.face ? [faces[place.face]] : []),
    ].join(', ')
  }

  /** What an element is, in the trade's words. */
  kind(element: LineElement): string {
    const { kinds } = this.w
    if (element.gate) return kinds[element.gate.form]
    if (element.post) return element.post === 'gate' ? kinds.gatePost : kinds[element.post]
    return element.tieIn ? kinds[element.tieIn] : element.crossing ? kinds[element.crossing] : kinds[element.kind]
  }

  /** A date without a time. */
  day(day: string): string {
    const [year, month, date] = day.split('-').map(Number) as [number, number, number]
    return fill(this.w.date, { day: date, month: this.w.months[month - 1]!, year })
  }

  /** A time of day with its zone, as the instant itself has it. */
  time(instant: string): string {
    const offset = /(Z|[+-]\d\d:\d\d)$/.exec(instant)?.[1] ?? 'Z'
    return `${instant.slice(11, 16)} ${this.voice.zones[offset] ?? (offset === 'Z' ? 'UTC' : `UTC${offset.replace('-', '\u2212')}`)}`
  }

  at(instant: string): string {
    return `${this.day(instant.slice(0, 10))}, ${this.time(instant)}`
  }

  /** Days of one month are named together: "2 and 3 Mar 2027". */
  days(instants: string[]): string {
    const days = [...new Set(instants.map(instant => instant.slice(0, 10)))].sort()
    const months = new Map<string, string[]>()
    for (const day of days) months.set(day.slice(0, 7), [...months.get(day.slice(0, 7)) ?? [], day])
    return listed([...months.values()].map((inMonth) => {
      const last = inMonth[inMonth.length - 1]!
      return listed([...inMonth.slice(0, -1).map(day => String(Number(day.slice(8)))), this.day(last)], this.w.and)
    }), this.w.and)
  }
}

const sum = (numbers: number[]) => numbers.reduce((all, one) => all + one, 0)

/** The figures of limits that a reading stands beside, in the system that it was read in. */
function figures(limits: Limit[], system: System): number[] {
  return limits.flatMap(limit => [limit.low, limit.high, limit.avoid?.low ?? null, limit.avoid?.high ?? null]
    .flatMap(bound => bound ? [bound[figureKey(bound, limit.unit, system, limit.id)]!] : []))
}

/** Thousandths as people write them: 2500 is 2.5. */
function thousandths(value: number): string {
  const digits = String(Math.abs(value) % 1000).padStart(3, '0').replace(/0+$/, '')
  return `${value < 0 ? '\u2212' : ''}${Math.floor(Math.abs(value) / 1000)}${digits ? `.${digits}` : ''}`
}
