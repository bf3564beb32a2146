import { entrance } from '../database/entrance'
import { loadDemo } from '../demo/loadDemo'

/** `SMOOTHSIDE_DEMO=load` (scripts/demo.mjs): loads the demo into an empty installation, then ends. */
export default defineNitroPlugin(() => {
  if (import.meta.prerender || process.env.SMOOTHSIDE_DEMO !== 'load') return
  entrance.installation()
    .then(async ({ organisations }) => { if (Number(organisations) === 0) await loadDemo() })
    .then(() => process.exit(0), (error: Error) => {
      console.error(error)
      process.exit(1)
    })
})
