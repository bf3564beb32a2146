// npm run bench [-- words]: runs every tests/bench/*.bench.ts in a process of its own and prints its figures.
// A bench's default export answers figures: an array of `Figure` (measure.ts). A figure that is not reached is said, not failed.
import '../../scripts/lib/nodeVersion.mjs'
import { spawn } from 'node:child_process'
import fs from 'node:fs'
import path from 'node:path'
import process from 'node:process'
import { projectRoot } from '../../scripts/lib/dataFolder.mjs'
import { startOwnTestCluster } from '../../scripts/lib/testCluster.mjs'
import { build } from 'vite'

const at = place => path.join(projectRoot, place)
/** Inside node_modules, so that the built benches find their packages. */
const folder = at('node_modules/.cache/smoothside-bench')
const wanted = process.argv.slice(2)
const benches = fs.readdirSync(at('tests/bench')).filter(name => name.endsWith('.bench.ts') && (!wanted.length || wanted.some(word => name.includes(word)))).sort()

/** Files that look for others beside themselves find them from the bundle too. */
const ownFolder = { name: 'own-folder', transform: (code, id) => (code.includes('import.meta.dirname') ? code.replaceAll('import.meta.dirname', JSON.stringify(path.dirname(id))) : null) }

/** TypeScript and aliases away, packages left alone: what runs is what the server's bundle would run. */
async function bundle(name) {
  const outDir = path.join(folder, name.replace(/\.bench\.ts$/, ''))
  await build({
    configFile: false,
    root: projectRoot,
    logLevel: 'error',
    plugins: [ownFolder],
    resolve: { alias: { '#shared': at('shared'), '#server': at('server'), '~~': projectRoot, '~': at('app') } },
    build: { ssr: at(`tests/bench/${name}`), outDir, emptyOutDir: true, target: 'node20', minify: false, rollupOptions: { output: { entryFileNames: 'bench.mjs' } } },
  })
  return path.join(outDir, 'bench.mjs')
}

function run(file, environment) {
  const program = `const { default: bench } = await import(${JSON.stringify(`file://${file}`)}); process.send(await bench()); process.disconnect()`
  return new Promise((resolve, reject) => {
    let figures
    const child = spawn(process.execPath, ['--expose-gc', '--input-type=module', '-e', program], { cwd: projectRoot, env: { ...process.env, ...environment }, stdio: ['ignore', 'inherit', 'inherit', 'ipc'] })
    child.once('message', (message) => { figures = message })
    child.once('error', reject)
    child.once('exit', code => (code === 0 && figures ? resolve(figures) : reject(new Error(`ended with ${code} and ${figures ? 'with' : 'without'} figures`))))
  })
}

const milliseconds = value => (value < 10 ? value.toFixed(2) : value.toFixed(0))
const cluster = await startOwnTestCluster()
process.once('SIGINT', () => {
  cluster.stop()
  process.exit(130)
})
try {
  if (!benches.length) console.log(`No bench ${wanted.length ? `matches ${wanted.join(' ')}` : 'is there'}.`)
  for (const name of benches) {
    console.log(`\n${name}`)
    try {
      for (const { name: what, ours, base, ratio, limit, cpuRatio } of await run(await bundle(name), { TEST_PG_URL: cluster.url })) {
        const wanted = limit === null ? 'no limit set' : `to be at most ${Number(limit.toFixed(2))}: ${ratio <= limit ? 'reached' : 'NOT REACHED'}`
        console.log(`  ${what}: ${ratio.toFixed(2)} times (${milliseconds(ours)} against ${milliseconds(base)}, medians${cpuRatio ? `; ${cpuRatio.toFixed(2)} in processor time` : ''}), ${wanted}`)
      }
    }
    catch (error) {
      console.error(`  could not be measured: ${error.message}`)
      process.exitCode = 1
    }
  }
}
finally { cluster.stop() }
