import { CountRefused } from '#shared/count/countRefused'
import { tensionBandHints } from '#shared/count/tensionBandHints'
import { limitWords, marginWords, placeLimits, figure } from '#shared/drawing/live/placedLimit'
import type { LiveWord } from '#shared/drawing/live/live'
import { drawFasteners } from '#shared/drawing/trial/drawFasteners'
import { DEGREE, type Angle } from '#shared/gate/leaf'
import { doubleLeaves } from '#shared/gate/doubleLeaves'
import { GateRefusal } from '#shared/gate/gateRefusal'
import { latchEndDrop } from '#shared/gate/latchEndDrop'
import { squareness } from '#shared/gate/squareness'
import { swingEnvelope } from '#shared/gate/swingEnvelope'
import { LimitRefused } from '#shared/limit/limitRefused'
import type { Length } from '#shared/measure/length'
import { largestSphere } from '#shared/opening/largestSphere'
import { OpeningRefusal } from '#shared/opening/openingRefusal'
import { limitOf, type Trial, type TrialLimit, type TrialOf } from '#shared/trial/trial'
import { limitFigure, trySwing, type TriedLeaf } from '#shared/trial/trySwing'

/** One line of an answer; the first is the largest. The tone repeats what the words say. */
export interface TrialLine { words: string, tone: 'good' | 'bad' | 'plain' | 'soft' | 'head' }

/** What a trial comes to, in words; worked out anew each time. A refusal of the measures is the only line there is, and says what to do. */
export function useTrialWords() {
  const { t } = useI18n()
  const say = (word: LiveWord, params: Readonly<Record<string, string>> = {}) => t(`walk.drawing.words.${word}`, params)
  const line = (tone: TrialLine['tone'], key: string, params: Record<string, string | number> = {}): TrialLine => ({ tone, words: t(`workbench.say.${key}`, params) })

  function answer(trial: Trial): TrialLine[] {
    const length = (amount: Length, beside: readonly Length[] = [0]) => figure(amount, trial.system, beside)
    const degrees = (angle: Angle, rounding: 'round' | 'floor' = 'round') => `${Math[rounding](angle / DEGREE)}°`
    const typed = t('workbench.limit.typedName')
    const whose = (limit: TrialLimit) => line('soft', 'limitOf', { limit: limitWords(limitOf(limit, typed), trial.system, say), whose: [limit.basis?.name ?? typed, limit.basis?.citation].filter(Boolean).join(' · ') })

    function swing(of: TrialOf<'swing'>): TrialLine[] {
      const asked = limitFigure(of.margin, 'low', of.system)
      const most = limitFigure(of.closed, 'high', of.system)
      const tried = trySwing(of)
      return [
        ...tried.flatMap(one => [...(tried.length > 1 ? [line('head', one.hinge === 'start' ? 'leafStart' : 'leafEnd')] : []), ...leaf(one, asked, most, of)]),
        ...[of.margin, of.closed].flatMap(limit => limit ? [whose(limit)] : []),
      ]
    }
    function leaf({ swing: { least, contact, needed }, range, closed, leaf: { clearance } }: TriedLeaf, asked: Length | null, most: Length | null, of: TrialOf<'swing'>): TrialLine[] {
      const lines: TrialLine[] = []
      if (!range) lines.push(line('good', 'worksFrom', { low: length(needed) }))
      else if (range.window) lines.push(line('good', 'works', { low: length(range.low), high: length(range.high) }))
      else {
        lines.push(line('bad', 'nothing', { amount: length(range.shortBy) }), line('plain', range.high >= 0 ? 'nothingWhy' : 'nothingClosed', { low: length(range.low), high: length(range.high) }))
        lines.push(range.opensTo === null ? line('plain', 'neverShut') : line('plain', 'opensTo', { angle: degrees(range.opensTo, 'floor') }))
      }
      const gap = least.gap < 0 ? line('bad', 'into', { amount: length(-least.gap), angle: degrees(least.angle) })
        : line(asked !== null && least.gap < asked ? 'bad' : 'plain', least.at === 'hinge' ? 'leastHinge' : 'least', { amount: length(least.gap), angle: degrees(least.angle) })
      // A gap that was rounded up to a whole length stands on the limit, not 1/320,000 mm inside it.
      if (asked !== null) gap.words += `, ${Math.abs(least.gap - asked) < 2 ? t('walk.drawing.words.atLimit') : t(`workbench.say.${least.gap < asked ? 'short' : 'inside'}`, { amount: length(Math.abs(least.gap - asked)), asked: length(asked) })}`
      const shut = line(most !== null && closed.largest.gap > most ? 'bad' : 'plain', 'closedGap', { where: t(`workbench.say.${closed.largest.distance === 0 ? 'atHinge' : 'atLatch'}`), amount: length(closed.largest.gap) })
      if (most !== null) shut.words += `, ${t(`workbench.say.${closed.largest.gap > most ? 'closedOver' : 'closedIn'}`, { amount: length(Math.abs(closed.largest.gap - most)), most: length(most) })}`
      lines.push(gap, contact === null ? line('plain', 'noContact', { angle: degrees(of.to) }) : line('bad', 'contact', { angle: degrees(contact, 'floor') }), shut)
      if (clearance === (range?.low ?? needed)) lines.push(line('soft', 'drawnAt', { amount: length(clearance) }))
      const ways = range?.waysOut ?? []
      if (ways.length > 0) lines.push(line('head', 'ways'))
      for (const way of ways) {
        const window: Record<string, string> = 'window' in way ? { low: length(way.window.low), high: length(way.window.high) } : {}
        if (way.code === 'rakeBottom') lines.push(line('plain', way.rise < 0 ? 'rakeDown' : 'rakeUp', { ...window, amount: length(Math.abs(way.rise)) }))
        else if (way.code === 'twoLeaves') lines.push(line('plain', 'twoLeaves', { low: length(way.start.low), high: length(way.start.high), low2: length(way.end.low), high2: length(way.end.high) }))
        else if (way.code === 'stopAt') lines.push(line('plain', 'stopAt', { angle: degrees(way.angle, 'floor') }))
        else lines.push(line('plain', way.code, { ...window, ...('height' in way && { amount: length(way.height) }), ...('cut' in way && { amount: length(way.cut) }) }))
      }
      return lines
    }

    switch (trial.kind) {
      case 'swing': return swing(trial)
      case 'path': {
        const { contact, clearance } = swingEnvelope(trial.leaf, trial.obstacle, trial.to)
        return [contact === null ? line('good', 'pathClear', { angle: degrees(trial.to), amount: length(clearance) }) : line('bad', trial.obstacle.kind === 'clearSpace' ? 'pathSpace' : 'pathContact', { angle: degrees(contact, 'floor') })]
      }
      case 'frame': {
        const square = squareness(trial, trial.error)
        if (!square.consistent) return [line('bad', 'mismatch', { amount: length(Math.abs(square.mismatch)) })]
        return [
          square.difference === 0 ? line('good', 'square', { amount: length(trial.first) }) : line('plain', 'diagonals', { amount: length(Math.abs(square.difference)), true: length(square.trueDiagonal) }),
          ...(square.difference === 0 ? [] : [line('plain', square.lean > 0 ? 'leansLatch' : 'leansHinge', { amount: length(Math.abs(square.lean)), angle: `${Math.abs(Math.round(square.angle / 10) / 100)}°` })]),
        ]
      }
      case 'drop': {
        const { angle, closed, opened } = latchEndDrop(trial.width, trial, trial.opened)
        if (closed === 0) return [line('good', 'noDrop')]
        return [
          line('plain', closed > 0 ? 'dropClosed' : 'riseClosed', { amount: length(Math.abs(closed)) }),
          line('plain', opened >= 0 ? 'dropOpened' : 'riseOpened', { angle: degrees(trial.opened), amount: length(Math.abs(opened)) }),
          line('soft', 'leans', { angle: `${Math.abs(Math.round(angle / 10) / 100)}°` }),
        ]
      }
      case 'leaves': {
        const meet = doubleLeaves(trial)
        return [
          line('plain', 'meetGap', { amount: length(meet.closed, [0, meet.needed]) }),
          meet.binds ? line('bad', 'binds', { amount: length(-meet.together) }) : line('good', 'meetNeed', { amount: length(meet.needed) }),
          meet.step === 0 ? line('plain', 'meetLevel') : line('plain', meet.step > 0 ? 'meetStep' : 'meetStepLow', { amount: length(Math.abs(meet.step)) }),
        ]
      }
      case 'opening': {
        const { diameter, assumesSquare } = largestSphere(trial.opening)
        const placed = placeLimits({ limits: trial.limits.map(limit => ({ limit: limitOf(limit, typed) })), reading: diameter, system: trial.system, say })
        return [
          line('plain', 'sphere', { amount: length(diameter, placed.flatMap(({ ends }) => ends)) }),
          ...placed.map((one): TrialLine => ({ ...line('plain', 'meets', { limit: one.words, whose: one.basis, margin: marginWords(one, trial.system, say).words }), tone: one.judgement?.verdict === 'conforms' ? 'good' : 'bad' })),
          ...(placed.length === 0 ? [line('soft', 'noLimit')] : []),
          ...(assumesSquare ? [line('soft', 'assumes')] : []),
          ...(['mesh', 'rhombus', 'pulledSquare'].includes(trial.opening.kind) ? [line('soft', 'stiff')] : []),
        ]
      }
      case 'fasteners': {
        const { fewest, faults, positions } = drawFasteners(trial)
        const given = trial.positions.length > 0
        const place = (index: number) => length(positions[index]!)
        return [
          line('plain', 'fewest', { n: fewest }),
          ...(given ? [line('plain', 'given', { n: positions.length }), ...(faults.length === 0 ? [line('good', 'noFault')] : [])] : positions.length > 1 ? [line('plain', 'even', { amount: length(positions[1]! - positions[0]!) })] : []),
          ...faults.map(({ from, to, gap, over }) => line('bad', from === null ? 'faultStart' : to === null ? 'faultEnd' : 'fault', { from: from === null ? '' : place(from), to: to === null ? '' : place(to), gap: length(gap), over: length(over) })),
          line('soft', 'fewestWhy'),
          ...(trial.of === 'bands' ? [line('soft', 'hints'), ...tensionBandHints(trial.length).map(({ rule, bands }) => line('soft', rule, { n: bands }))] : []),
        ]
      }
    }
  }

  return (trial: Trial): TrialLine[] => {
    try { return answer(trial) }
    catch (error) {
      if (error instanceof GateRefusal || error instanceof OpeningRefusal) return [{ tone: 'bad', words: t(`walk.drawing.refusal.${error.code}`) }]
      if (error instanceof CountRefused) return [{ tone: 'bad', words: t(`workbench.refused.${error.code}`) }]
      if (error instanceof LimitRefused) return [{ tone: 'bad', words: t('walk.drawing.refusal.limit') }]
      throw error
    }
  }
}
