import { createApp, h, nextTick, shallowRef, type App } from 'vue'
import { createI18n } from 'vue-i18n'
import DrawingSvg from '~/components/drawing/DrawingSvg.vue'
import LiveDrawing from '~/components/drawing/LiveDrawing.vue'
import type { LiveName, LiveParameters } from '#shared/drawing/live/drawLive'
import type { LiveLimit } from '#shared/drawing/live/live'
import { DEGREE } from '#shared/gate/leaf'
import { INCH, type Length } from '#shared/measure/length'
import en from '../../../i18n/locales/en/walk.json'
import es from '../../../i18n/locales/es/walk.json'

const limit = (low: Length | null, high: Length | null, name = 'Velmor County'): LiveLimit => ({
  limit: {
    id: name, measurand: 'm', datum: 'd', unit: 'length', avoid: null, basis: { kind: 'authority', name, citation: 'Sec. 4-12' },
    low: low === null ? null : { imperial: low, inclusive: true }, high: high === null ? null : { imperial: high, inclusive: true },
  },
})
const read = (from: Length, step: number, ...limits: LiveLimit[]) => ({ system: 'imperial' as const, size: 'field' as const, reading: from + step * INCH / 16, limits })

/** Each live drawing as it stands after so many keys on the tape pad, or so many degrees. */
const STEPS: { [Name in LiveName]: (step: number) => Omit<LiveParameters[Name], 'say'> } = {
  latchHeight: step => ({ ...read(53 * INCH, step, limit(54 * INCH, null), { ...limit(null, 54 * INCH, 'Reach'), shift: -1.5 * INCH }), from: 'leaf', leafHeight: 70 * INCH, gapBelow: 1.5 * INCH }),
  gapBelow: step => ({ ...read(INCH, step, limit(null, 2 * INCH)), edge: 'wire', slope: { rise: -INCH, over: 96 * INCH }, coming: { words: 'mulch', thickness: 3 * INCH } }),
  swingClearance: step => ({
    ...read(0, 0, limit(INCH / 2, null)), reading: null, leaf: { width: 46 * INCH, clearance: INCH + step * INCH / 16 }, to: 90 * DEGREE, angle: step * 2 * DEGREE, closedAtMost: 4 * INCH,
    ground: { plane: { along: { rise: 0.75 * INCH, over: 46 * INCH }, across: { rise: 1.5 * INCH, over: 46 * INCH } } },
  }),
  opening: step => ({ ...read(1.5 * INCH, step, limit(null, 1.75 * INCH)), shape: 'mesh', dimension: 'side' }),
  tieEnd: step => ({ size: 'field', ends: step % 2 ? 'in' : 'out' }),
  spacing: step => ({ ...read(23 * INCH, step, limit(null, 24 * INCH)), between: 'tiesOnRail' }),
  height: step => ({ ...read(47 * INCH, step, limit(48 * INCH, null)), of: 'fence' }),
  closing: step => ({ size: 'field', trials: [90, 45, 8].map((degrees, i) => ({ label: `${degrees}`, angle: degrees * DEGREE, good: (step + i) % 4, of: 3 })) }),
  clearWidth: step => read(31 * INCH, step, limit(32 * INCH, null)),
}

/** From the key to the end of the frame that shows it: recomputed, patched, laid out, painted. */
function frameOf(change: () => void): Promise<number> {
  return new Promise(resolve => requestAnimationFrame(() => {
    const begin = performance.now()
    change()
    void nextTick(() => {
      // A message waits until the frame in hand is painted.
      const { port1, port2 } = new MessageChannel()
      port1.onmessage = () => resolve(performance.now() - begin)
      port2.postMessage(null)
    })
  }))
}

const step = shallowRef(0)
let shown: App | null = null

/** Puts a drawing on the page, in place of the one before. */
function show(name: LiveName): void {
  shown?.unmount()
  step.value = 0
  shown = createApp({ render: () => h(LiveDrawing as never, { name, parameters: STEPS[name](step.value) }) })
  shown.use(createI18n({ legacy: false, locale: 'en', messages: { en, es } })).component('DrawingSvg', DrawingSvg)
  shown.mount('#page')
  if (!document.querySelector('#page svg path')) throw new Error(`${name} was not drawn`)
}
Object.assign(globalThis, { drawings: Object.keys(STEPS), show, move: () => frameOf(() => { step.value = (step.value + 1) % 40 }) })
