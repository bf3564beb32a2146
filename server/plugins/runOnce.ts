import { entrance } from '../database/entrance'
import { loadDemo } from '../demo/loadDemo'
import { refoldAll } from '../services/round/refold'

/** What scripts have the built server do once, in a run of its own that ends by itself. */
const RUNS: Record<string, () => Promise<void>> = {
  async demo() {
    if (Number((await entrance.installation()).organisations) === 0) await loadDemo()
  },
  async refold() {
    const { rounds, changed } = await refoldAll()
    console.log(`${rounds} rounds folded again, ${changed} differed from what was kept.`)
  },
}

export default defineNitroPlugin(() => {
  const run = RUNS[process.env.SMOOTHSIDE_RUN ?? '']
  if (import.meta.prerender || !run) return
  run().then(() => process.exit(0), (error: Error) => {
    console.error(error)
    process.exit(1)
  })
})
