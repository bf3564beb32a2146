import type { JobPageOf } from '#shared/api/job'
import type { Drawing } from '#shared/drawing/displayList'
import { limitBand } from '#shared/drawing/limitBand'
import { placeLimits } from '#shared/drawing/live/placedLimit'
import { combineLimits } from '#shared/limit/combineLimits'
import type { Limit } from '#shared/limit/limit'
import { elementsOf, type Setting } from '#shared/line/line'
import type { LeafTogether, Together } from '#shared/provision/limitsTogether'
import type { QuestionAbout } from '#shared/question/question'
import type { RoundBasis } from '#shared/round/basis'

/** A clash as a card tells it, with the question that it asks of the authority. */
export interface ClashCard { key: string, title: string, places: string, sentence: string, drawing: Drawing | null, limits: { words: string, limit: Limit }[], ways: string[], note: string, about: QuestionAbout, words: string }

/** The clashes of a job in words and drawings, and the questions that they and unset limits ask. */
export function useLimitClashes(basis: MaybeRefOrGetter<RoundBasis>, job: MaybeRefOrGetter<JobPageOf['job']>) {
  const { t } = useI18n()
  const together = useLimitsTogether(basis)
  const { found, speech, limitOf, both, title, amount, places, band, gapOf, checks, tags } = together
  const all = computed(() => found.value.all?.measurands ?? [])
  const length = (value: number) => speech.value.length(value)
  const elements = computed(() => elementsOf(toValue(basis).line))

  /** Keys of the limits that clash. */
  const clashing = (one: Together) => [...new Set([...one.byDatum.flatMap(each => each.clashes), ...one.joined?.clashes ?? []].flatMap(clash => clash.kind === 'apart' ? [clash.low, clash.high] : [...clash.limits, ...clash.bands]))]
  function sentenceOf(one: Together): string {
    const { joined } = one
    const apart = (joined?.clashes ?? one.byDatum.flatMap(each => each.clashes)).find(clash => clash.kind === 'apart')
    const by = apart ? amount(apart.by, one.unit) : ''
    if (!joined) return apart ? t(apart.by > 0 ? 'limits.apart' : 'limits.touch', { by }) : t('limits.bandLeavesNothing')
    if (!joined.works) return t('limits.whateverGap', { by, gap: amount(joined.at ?? 0, 'length') })
    const { from, to } = joined.works
    const gap = to === 0 ? t('limits.gap.none') : to === null ? t('limits.gap.atLeast', { x: length(from) }) : from === joined.gap.from ? t('limits.gap.upTo', { x: length(to) }) : t('limits.gap.between', { low: length(from), high: length(to) })
    return joined.at === null ? t('limits.onlyGapOpen', { gap }) : t('limits.onlyGap', { gap, at: length(joined.at), by })
  }
  const told = (keys: readonly string[]) => keys.map(limitOf).map(limit => ({ words: speech.value.limit(limit), limit }))
  function whoGives(keys: readonly string[]): string[] {
    const name = toValue(job).authorityName
    return [
      name ? t('limits.way.authority', { name }) : t('limits.way.someAuthority'),
      ...(keys.some(key => limitOf(key).basis.kind === 'specification') ? [t('limits.way.client')] : []),
      ...(keys.some(key => limitOf(key).basis.kind === 'organisation') ? [t('limits.way.own')] : []),
    ]
  }
  const lowLatchAt = (one: Together) => one.checks.includes('latch-height-leaf') && toValue(basis).tasks.some(task => task.check === 'low-latch-below-top' && one.places.some(place => place.element === task.element))
  /** The setting at those elements that brings the check, for a number that an answer sets. */
  function settingAt(ids: readonly string[], checkIds: readonly string[]): Setting {
    const here = elements.value.filter(element => ids.includes(element.id)).flatMap(element => [...element.faces.outer.settings, ...element.faces.inner.settings])
    return checkIds.flatMap(id => checks.value.get(id)!.settings).find(each => here.includes(each)) ?? here[0] ?? 'school'
  }
  function aboutOf(one: Together): QuestionAbout {
    const ids = one.places.map(place => place.element)
    const check = checks.value.get(one.checks[0]!)!
    return {
      title: check.title, tags: [...new Set(ids)].map(id => tags.value.get(id)!), measurand: one.measurand, unit: one.unit, datum: check.datum!, setting: settingAt(ids, one.checks),
      limits: one.limits.map(limitOf).slice(0, 20), gap: gapOf(one),
    }
  }
  const texts = (keys: readonly string[]) => keys.map(limitOf).map(limit => `${speech.value.limit(limit)} (${speech.value.basis(limit.basis)})`).join('; ')

  const cards = computed<ClashCard[]>(() => all.value.filter(one => one.state === 'clash' || one.state === 'hangs').map(one => ({
    key: `${one.measurand} ${one.limits.join()}`, title: title(one), places: places(one.places.map(place => place.element)), sentence: sentenceOf(one), drawing: band(one), limits: [...told(clashing(one)), ...told(one.joined?.gapBy ?? []).map(({ words, limit }) => ({ words: t('limits.gapLimit', { limit: words }), limit }))],
    ways: [...(lowLatchAt(one) ? [t('limits.way.lowRelease')] : []), ...(one.joined ? [t('limits.way.raiseGround')] : []), ...whoGives(clashing(one))],
    note: both(checks.value.get(one.checks[0]!)!.note), about: aboutOf(one), words: t('limits.question.clash', { texts: texts(clashing(one)) }),
  })))
  function waysOfLeaf({ range, closedBy, swingBy }: LeafTogether): string[] {
    return [...range.waysOut.map((way) => {
      switch (way.code) {
        case 'threshold': return t('limits.way.threshold', { x: length(way.height) })
        case 'regrade': return t('limits.way.regrade', { x: length(way.cut) })
        case 'rakeBottom': return t('limits.way.rakeBottom', { x: length(Math.abs(way.rise)) })
        case 'stopAt': return t('limits.way.stopAt', { angle: Math.floor(way.angle / 1000) })
        default: return t(`limits.way.${way.code}`)
      }
    }), ...whoGives([...closedBy, ...swingBy])]
  }
  function bandOfLeaf({ range, closedBy }: LeafTogether): Drawing {
    const end = (amount: number) => ({ imperial: amount, metric: amount, inclusive: true })
    const lane = (id: string, low: number | null, high: number | null): Limit => ({ id, measurand: 'hung', datum: 'ground', unit: 'length', low: low === null ? null : end(low), high: high === null ? null : end(high), avoid: null, basis: limitOf(closedBy[0]!).basis })
    const lanes = [lane('closed', null, range.high), lane('swing', range.low, null)]
    const { system } = toValue(basis).line
    return limitBand({ placed: placeLimits({ limits: lanes.map(limit => ({ limit })), reading: null, system, say: () => '' }), windows: combineLimits(lanes, { datum: 'ground', system }).windows, tape: system, figure: length })
  }
  const leafTitle = (leaf: LeafTogether) => t('limits.leafTitle', { tag: tags.value.get(leaf.element)! })
  const leafCards = computed<ClashCard[]>(() => (found.value.all?.leaves ?? []).filter(leaf => leaf.range.window === null).map((leaf) => {
    const keys = [...leaf.closedBy, ...leaf.swingBy]
    const check = checks.value.get('gate-gap-below') ?? checks.value.get(toValue(basis).tasks.find(task => task.element === leaf.element && task.limits.some(key => keys.includes(key)))!.check)!
    const sentence = t('limits.leafShort', { low: length(leaf.range.low), high: length(leaf.range.high), by: length(leaf.range.shortBy) })
    return {
      key: `${leaf.element} ${leaf.leaf}`, title: leafTitle(leaf), places: t('limits.leafOf', { width: length(leaf.width) }), sentence, drawing: bandOfLeaf(leaf), limits: told(keys), ways: waysOfLeaf(leaf), note: t('limits.leafNote'),
      about: { title: check.title, tags: [tags.value.get(leaf.element)!], measurand: check.measurand!, unit: 'length', datum: check.datum!, setting: settingAt([leaf.element], [check.id]), limits: keys.map(limitOf), gap: null },
      words: t('limits.question.leaf', { sentence, texts: texts(keys) }),
    }
  }))
  const hung = computed(() => (found.value.all?.leaves ?? []).filter(leaf => leaf.range.window !== null).map(leaf => ({ key: `${leaf.element} ${leaf.leaf}`, title: leafTitle(leaf), words: t('limits.leafHang', { low: length(leaf.range.low), high: length(leaf.range.high) }) })))
  const unset = computed(() => all.value.filter(one => one.state === 'unset' && one.class !== 'ownerMayAccept').map(one => ({
    key: `${one.measurand} ${one.checks.join()}`, title: title(one), places: places(one.places.map(place => place.element)), about: aboutOf(one), words: t('limits.question.unset'),
  })))
  const windows = computed(() => all.value.filter(one => one.state === 'window'))
  return { refused: computed(() => found.value.refused), cards: computed(() => [...cards.value, ...leafCards.value]), windows, hung, unset }
}
