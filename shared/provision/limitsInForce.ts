import { FLOORED_CONCERNS } from '../checklist/check'
import type { Check } from '../checklist/check'
import { compileCondition } from '../checklist/condition'
import { factsOf } from '../checklist/facts'
import type { Facts } from '../checklist/facts'
import { BASIS_KINDS } from '../limit/limit'
import type { Bound, Limit } from '../limit/limit'
import { FACES } from '../line/line'
import type { Face, LineElement } from '../line/line'
import type { System } from '../measure/length'
import type { Provision } from './provision'

/** A limit that would have held, what stands in its place, and why. */
export interface SetAside {
  limit: Limit
  /** Id of the limit that stands in its place. */
  by: string
  why: 'replaced' | 'looser'
}

/** What holds for a check at a place. */
export interface LimitsInForce {
  limits: Limit[]
  setAside: SetAside[]
  /** Provisions that wanted to replace a limit that only an authority may loosen: both stand, and the screen says so. */
  notLoosened: { provision: string, limit: string }[]
  /** Ids of provisions in force here that carry a note. */
  notes: string[]
}

const byCodePoint = (one: { id: string }, other: { id: string }) => one.id < other.id ? -1 : one.id > other.id ? 1 : 0
const rank = (limit: Limit) => BASIS_KINDS.indexOf(limit.basis.kind)

// A limit is made once for each source, so that a walk list of thousands of tasks shares it and can tell it by identity.
const plain = new WeakMap<Check['limits'][number], Limit>()
const provided = new WeakMap<Provision, Limit>()

function withoutCondition(limit: Check['limits'][number]): Limit {
  const earlier = plain.get(limit)
  if (earlier) return earlier
  const { when: _, ...made } = limit
  plain.set(limit, made)
  return made
}

function limitOf(provision: Provision): Limit | null {
  if (!provision.limit) return null
  const earlier = provided.get(provision)
  if (earlier) return earlier
  const { kind, name, citation, edition, confirmedBy, confirmedOn } = provision
  const made: Limit = {
    id: provision.id,
    measurand: provision.measurand,
    datum: provision.limit.datum,
    unit: provision.limit.unit,
    low: provision.limit.low,
    high: provision.limit.high,
    avoid: provision.limit.avoid,
    basis: { kind, name, citation, ...(edition === undefined ? {} : { edition }), confirmedBy, confirmedOn },
  }
  provided.set(provision, made)
  return made
}

/** Every limit that these checks and local numbers can bring, wherever on a line: what an element that is added later may still need. */
export function possibleLimits(checks: readonly Check[], provisions: readonly Provision[]): Limit[] {
  return [...checks.flatMap(check => check.limits.map(withoutCondition)), ...provisions.flatMap(provision => limitOf(provision) ?? [])]
}

/** -1 when `one` asks less than `other` at this end, 0 alike, 1 more; null when no common system tells, or the systems contradict each other. */
function compareEnd(one: Bound | null, other: Bound | null, end: 'low' | 'high'): -1 | 0 | 1 | null {
  if (!one || !other) return one ? 1 : other ? -1 : 0
  const answers = (['imperial', 'metric', 'plain'] as const).flatMap((system): (-1 | 0 | 1)[] => {
    const [a, b] = [one[system], other[system]]
    if (a === undefined || b === undefined) return []
    if (a !== b) return [(a > b) === (end === 'low') ? 1 : -1]
    return [one.inclusive === other.inclusive ? 0 : one.inclusive ? -1 : 1]
  })
  const [first] = answers
  // A figure that only one of them prints is no comparison: the reading may be taken in that system.
  const alike = (['imperial', 'metric', 'plain'] as const).every(system => (one[system] === undefined) === (other[system] === undefined))
  return first !== undefined && alike && answers.every(answer => answer === first) ? first : null
}

/** True when whatever meets `strict` meets `loose` as well, by their printed figures alone. */
export function isLooser(loose: Limit, strict: Limit): boolean {
  if (loose.measurand !== strict.measurand || loose.datum !== strict.datum || loose.unit !== strict.unit) return false
  const low = compareEnd(loose.low, strict.low, 'low')
  const high = compareEnd(loose.high, strict.high, 'high')
  if (low === null || high === null || low > 0 || high > 0) return false
  if (!loose.avoid) return true
  if (!strict.avoid) return false
  // The looser band lies within the stricter one: it begins no lower and ends no higher.
  const from = compareEnd(loose.avoid.low, strict.avoid.low, 'low')
  const to = compareEnd(loose.avoid.high, strict.avoid.high, 'high')
  return loose.avoid.low.inclusive === strict.avoid.low.inclusive && loose.avoid.high.inclusive === strict.avoid.high.inclusive
    && from !== null && to !== null && from >= 0 && to >= 0
}

const holds = (when: string | undefined, at: readonly Facts[]) => when === undefined || at.some(facts => compileCondition(when).holds(facts))

/**
 * What holds for a check where `at` are the facts of the faces that it is about (one face, or those of the element that call for it).
 *
 * - A provision holds where its measurand, setting and condition fit; its limit joins the checks that take the measurand from its datum.
 * - `replace` puts the limits of a weaker kind on the measurand aside, whatever their datum. Where the check is for law, drowning, entrapment, exits or
 *   accessibility only an authority can do that: a specification or the organisation can add, never loosen.
 * - `stricterOf` puts aside, of each pair on one datum, the one that asks less; a pair that cannot be told apart stands whole.
 * - Nothing is dropped silently: every limit that would have held is in `limits` or in `setAside`. The order of the provisions does not matter.
 */
export function limitsAt(check: Check, at: readonly Facts[], provisions: readonly Provision[]): LimitsInForce {
  const builtIn = check.limits.filter(limit => holds(limit.when, at)).map(withoutCondition)
  const { measurand, datum, unit } = check
  if (measurand === undefined || provisions.length === 0) return { limits: builtIn, setAside: [], notLoosened: [], notes: [] }

  const fitting = provisions
    .filter(provision => provision.measurand === measurand
      && (provision.setting === null || at.some(facts => facts.face.settings.includes(provision.setting!)))
      && holds(provision.when, at))
    .sort(byCodePoint)
  const own = fitting.flatMap(provision => limitOf(provision) ?? [])
  let limits = [...builtIn, ...own.filter(limit => limit.datum === datum && limit.unit === unit)]
  const setAside: SetAside[] = []
  const notLoosened: LimitsInForce['notLoosened'] = []
  const put = (gone: Limit, by: Limit, why: SetAside['why']) => {
    setAside.push({ limit: gone, by: by.id, why })
    limits = limits.filter(limit => limit !== gone)
  }

  const floored = FLOORED_CONCERNS.includes(check.concern)
  const limitById = new Map(own.map(limit => [limit.id, limit]))
  const replacing = fitting.flatMap((provision) => {
    const limit = limitById.get(provision.id)
    return limit && provision.effect === 'replace' ? [limit] : []
  }).sort((one, other) => rank(other) - rank(one) || byCodePoint(one, other))
  for (const limit of [...limits]) {
    const stronger = replacing.find(by => rank(by) > rank(limit) && (!floored || by.basis.kind === 'authority'))
    if (stronger) put(limit, stronger, 'replaced')
    else notLoosened.push(...replacing.filter(by => rank(by) > rank(limit)).map(by => ({ provision: by.id, limit: limit.id })))
  }
  const comparing = fitting.filter(provision => provision.effect === 'stricterOf').flatMap(provision => limits.filter(limit => limit.id === provision.id))
  for (const one of comparing) {
    for (const other of limits.filter(limit => limit !== one)) {
      if (!limits.includes(one)) break
      if (isLooser(other, one)) put(other, one, 'looser')
      else if (isLooser(one, other)) put(one, other, 'looser')
    }
  }
  return { limits, setAside, notLoosened, notes: fitting.filter(provision => provision.note !== undefined).map(provision => provision.id) }
}

/** {@link limitsAt} for a check on an element: at one face, or (null) over all faces whose settings call for the check. */
export function limitsInForce(check: Check, element: LineElement, face: Face | null, provisions: readonly Provision[], system: System = 'imperial'): LimitsInForce {
  const facts = factsOf(element, system)
  return limitsAt(check, facesAsking(check, face === null ? FACES.map(name => facts[name]) : [facts[face]]), provisions)
}

/** The faces, of those given, that call for a check: by their settings and its condition. */
export function facesAsking(check: Check, faces: readonly Facts[]): Facts[] {
  return faces.filter(facts => (check.settings.length === 0 || check.settings.some(setting => facts.face.settings.includes(setting))) && holds(check.when, [facts]))
}
