import { fileURLToPath } from 'node:url'
import { defineConfig } from 'vitest/config'

const at = (path: string) => fileURLToPath(new URL(path, import.meta.url))
const alias = { '~~': at('.'), '~': at('app'), '#shared': at('shared'), '#server': at('server') }
const project = (name: string, include: string[], more: object = {}) => ({ resolve: { alias }, test: { name, include, environment: 'node', ...more } })

/** Each kind of test is a project of its own: `npx vitest run --project unit`. */
export default defineConfig({
  test: {
    projects: [
      project('unit', ['tests/unit/**/*.spec.ts'], { testTimeout: 60_000 }),
      project('published', ['tests/published/**/*.spec.ts'], { testTimeout: 60_000 }),
      project('documents', ['tests/documents/**/*.spec.ts'], { testTimeout: 60_000, hookTimeout: 60_000 }),
      project('database', ['tests/database/**/*.spec.ts'], { testTimeout: 60_000, hookTimeout: 120_000 }),
      project('api', ['tests/api/**/*.spec.ts'], { fileParallelism: false, testTimeout: 60_000, hookTimeout: 120_000 }),
      project('browser', ['tests/browser/**/*.spec.ts'], { fileParallelism: false, maxConcurrency: 2, testTimeout: 240_000, hookTimeout: 120_000 }),
    ],
  },
})
