import path from 'node:path'
import { launchBrowser } from '../helpers/browser'
import { buildPage } from './liveDrawing/buildPage'
import { median, type Figure } from './measure'

const FRAME = 16
const SLOWED = 4
const ROUNDS = 60
const WARM_UPS = 10

/**
 * Each live drawing in a real browser with its processor slowed fourfold: a reading moves by a sixteenth, the component computes its display list anew, patches
 * the page, and the frame is laid out and painted. What counts is the processor time that the page's thread takes for it, which a busy machine does not lengthen;
 * the clock's own figure stands beside it. The graphics process's work is not in either. Beside a frame of 16 ms.
 */
export default async function bench(): Promise<Figure[]> {
  const root = path.resolve(import.meta.dirname, '../..')
  const html = await buildPage(root, path.join(root, 'tests/bench/liveDrawing/page.ts'))
  const browser = await launchBrowser()
  try {
    const page = await browser.newPage({ viewport: { width: 360, height: 780 }, deviceScaleFactor: 2 })
    await page.setContent(html)
    const client = await page.context().newCDPSession(page)
    await client.send('Performance.enable', { timeDomain: 'threadTicks' })
    await client.send('Emulation.setCPUThrottlingRate', { rate: SLOWED })
    const spent = async () => (await client.send('Performance.getMetrics')).metrics.find(metric => metric.name === 'TaskDuration')!.value * 1000
    const figures: Figure[] = []
    for (const name of await page.evaluate<string[]>('drawings')) {
      await page.evaluate(`show(${JSON.stringify(name)})`)
      const [busy, clock]: [number[], number[]] = [[], []]
      for (let round = 0; round < WARM_UPS + ROUNDS; round++) {
        const before = await spent()
        const took = await page.evaluate<number>('move()')
        if (round < WARM_UPS) continue
        busy.push(await spent() - before)
        clock.push(took)
      }
      busy.sort((a, b) => a - b)
      const figure = (what: string, ours: number): Figure => ({ name: `${name}, ${what}`, ours, base: FRAME, ratio: ours / FRAME, limit: 1 })
      figures.push(figure('processor time against a frame', median(busy)), figure('its 95th percentile', busy[Math.ceil(busy.length * 0.95) - 1]!), figure('by the clock', median(clock)))
    }
    return figures
  }
  finally { await browser.close() }
}
