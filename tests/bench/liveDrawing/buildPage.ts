import { readFileSync } from 'node:fs'
import path from 'node:path'
import vue from '@vitejs/plugin-vue'
import Unimport from 'unimport/unplugin'
import { build, type Rollup } from 'vite'

/** A page of the screens' own components as one text: its script and styles inside, the names that Nuxt gives without an import given here as well. */
export async function buildPage(root: string, entry: string): Promise<string> {
  const at = (place: string) => path.join(root, place)
  const { output } = await build({
    configFile: false, root, logLevel: 'error', define: { 'process.env.NODE_ENV': '"production"', '__VUE_PROD_DEVTOOLS__': 'false' },
    plugins: [Unimport.vite({ presets: ['vue'], imports: [{ name: 'useI18n', from: 'vue-i18n' }], dirs: [at('app/composables')] }), vue()],
    resolve: { alias: { '#shared': at('shared'), '~': at('app') } },
    build: { write: false, target: 'es2022', cssCodeSplit: false, assetsInlineLimit: 1_000_000, rollupOptions: { input: entry, output: { format: 'iife' } } },
  }) as Rollup.RollupOutput
  const styles = output.flatMap(one => one.type === 'asset' && one.fileName.endsWith('.css') ? [String(one.source)] : [])
  const script = output.flatMap(one => one.type === 'chunk' ? [one.code] : []).join('\n').replaceAll('</script', '<\\/script')
  const tokens = readFileSync(at('app/assets/css/tokens.css'), 'utf8')
  return `<!doctype html><html lang="en"><meta charset="utf-8"><meta name="viewport" content="width=device-width"><style>${tokens}${styles.join('\n')}</style><body><div id="page"></div><script>${script}</script>`
}
