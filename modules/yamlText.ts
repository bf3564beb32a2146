import { readFileSync } from 'node:fs'
import { defineNuxtModule } from '@nuxt/kit'

/** Lets server code import a YAML file as its text (`./list.yaml?raw`), as Vite and vitest do: the built-in checklists travel inside the built server. */
export default defineNuxtModule({
  meta: { name: 'yaml-text' },
  setup(_options, nuxt) {
    nuxt.hook('nitro:config', (config) => {
      const text = {
        name: 'yaml-text',
        load: (id: string) => id.endsWith('.yaml?raw') ? `export default ${JSON.stringify(readFileSync(id.slice(0, -'?raw'.length), 'utf8'))}` : null,
      }
      config.rollupConfig = { ...config.rollupConfig, plugins: [config.rollupConfig?.plugins ?? [], text] } as typeof config.rollupConfig
    })
  },
})
