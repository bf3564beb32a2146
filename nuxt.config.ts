import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'

/** The rooms that have a message file of their own under i18n/locales/<language>/. */
const messageFiles = (language: string) =>
  ['base', 'account', 'job', 'line', 'site', 'numbers', 'limits', 'workbench', 'instrument', 'walk', 'deficiency', 'signature', 'record', 'portal', 'check', 'people', 'erasure']
    .map(word => `${language}/${word}.json`)

export default defineNuxtConfig({
  modules: [
    '@pinia/nuxt',
    '@nuxtjs/tailwindcss',
    '@nuxtjs/i18n',
    '@vueuse/nuxt',
    'nuxt-auth-utils',
    'nuxt-security',
    '@vite-pwa/nuxt',
    '@nuxt/eslint',
    'reka-ui/nuxt',
  ],
  // A component is named by its file alone; the folder is the room's word.
  components: [{ path: '~/components', pathPrefix: false }],
  devtools: { enabled: false },
  app: { head: { htmlAttrs: { lang: 'en' }, title: 'Smoothside', link: [{ rel: 'icon', type: 'image/svg+xml', href: '/mark.svg' }],
    // The field pages are one static shell: the chosen light is put on before the first paint.
    script: [{ tagPosition: 'head', innerHTML: 'var m=/(?:^|; )smoothside-theme=(\\w+)/.exec(document.cookie);if(m&&m[1]!=="device")document.documentElement.dataset.theme=m[1]' }] } },
  css: ['~/assets/css/fonts.css', '~/assets/css/tokens.css', '~/assets/css/base.css'],
  runtimeConfig: { session: { name: 'smoothside-session', password: '', maxAge: 60 * 60 * 24 * 30, cookie: { sameSite: 'lax', secure: false } } },
  routeRules: { '/w/**': { ssr: false } },
  experimental: { typedPages: true, payloadExtraction: false },
  compatibilityDate: '2026-01-01',
  nitro: {
    compressPublicAssets: true,
    prerender: { routes: ['/w'], crawlLinks: false },
    // sharp and pg-boss carry native or dynamic parts; Nitro traces them into .output itself
    esbuild: { options: { target: 'node20' } },
    // A checklist is read as its text (`?raw`), on the server too, where Vite is not at hand.
    rollupConfig: { output: {}, plugins: [{
      name: 'yaml-as-text',
      load: (id: string) => id.endsWith('.yaml?raw') ? `export default ${JSON.stringify(readFileSync(id.slice(0, -4), 'utf8'))}` : null,
    }] },
  },
  // Tests of the screens' rules see what the screens see: auto-imports among it.
  typescript: { strict: true, tsConfig: { include: ['../tests/unit/app/**/*.ts', '../tests/bench/liveDrawing/page.ts'] } },
  telemetry: false,
  hooks: {
    'nitro:config'(config) {
      // Ours in front, or an /api error would be answered by the page renderer; Nuxt's stays behind for pages.
      const ours = fileURLToPath(new URL('./server/http/problemHandler.ts', import.meta.url))
      config.errorHandler = [ours, ...[config.errorHandler ?? []].flat()]
    },
  },
  i18n: {
    defaultLocale: 'en',
    strategy: 'no_prefix',
    detectBrowserLanguage: { useCookie: true, cookieKey: 'smoothside-language', fallbackLocale: 'en' },
    experimental: { prerenderMessages: true },
    locales: [
      { code: 'en', language: 'en-US', name: 'English', files: messageFiles('en') },
      { code: 'es', language: 'es-US', name: 'Español', files: messageFiles('es') },
    ],
  },
  pwa: {
    strategies: 'injectManifest',
    srcDir: '../app/offline',
    filename: 'serviceWorker.ts',
    registerType: 'prompt',
    manifest: { name: 'Smoothside', short_name: 'Smoothside', start_url: '/w', display: 'standalone', theme_color: '#0E5A43', background_color: '#F5F7F4', icons: [{ src: '/mark.svg', sizes: 'any', type: 'image/svg+xml' }] },
    injectManifest: { globPatterns: ['**/*.{js,css,html,woff2,svg,json}'] },
    client: { installPrompt: false },
  },
  security: {
    rateLimiter: false, // ours counts in PostgreSQL, per address and account
    xssValidator: false, // Vue escapes; the validator would refuse honest quotes and feet marks
    requestSizeLimiter: false, // each route holds its own limit (readBytes), and says how much it takes
    headers: {
      crossOriginEmbedderPolicy: false,
      contentSecurityPolicy: { 'img-src': ['\'self\'', 'data:', 'blob:'], 'upgrade-insecure-requests': false },
      strictTransportSecurity: false, // the operator's proxy sets it where there is TLS
      permissionsPolicy: { camera: ['self'], geolocation: [] },
    },
  },
  tailwindcss: { viewer: false },
})
