import { mkdirSync, writeFileSync } from 'node:fs'
import path from 'node:path'
import { chromium, type Browser, type BrowserContext, type BrowserContextOptions, type Page } from 'playwright-core'

/** The two sizes that every screen is made for. */
export const sizes = {
  phone: { viewport: { width: 360, height: 780 }, isMobile: true, hasTouch: true, deviceScaleFactor: 2 },
  desk: { viewport: { width: 1360, height: 900 }, isMobile: false, hasTouch: false, deviceScaleFactor: 1 },
} as const
export type Size = keyof typeof sizes

/** Debian's chromium; close it in afterAll. */
export const launchBrowser = (): Promise<Browser> => chromium.launch({
  executablePath: process.env.CHROMIUM ?? '/usr/bin/chromium',
  args: ['--no-sandbox', '--disable-dev-shm-usage', '--disable-background-networking', '--disable-component-update', '--no-first-run'],
})

export interface Visit { context: BrowserContext, page: Page, /** Faults that the page met so far: exceptions and messages of level error. */ faults: string[] }

/** A visitor of their own (no shared cookies or database), who may reach this machine only: anything else is a fault of the page. */
export async function visit(browser: Browser, baseURL: string, size: Size, options: BrowserContextOptions = {}): Promise<Visit> {
  const context = await browser.newContext({ ...sizes[size], baseURL, locale: 'en-US', timezoneId: 'America/Chicago', reducedMotion: 'reduce', acceptDownloads: true, ...options })
  const faults: string[] = []
  await context.route(url => !['127.0.0.1', 'localhost'].includes(url.hostname), (route) => {
    faults.push(`asked for ${route.request().url()}`)
    return route.abort()
  })
  const page = await context.newPage()
  return { context, page, faults: faultsOf(page, faults) }
}

/** Faults that a page meets from now on, one after the other. */
export function faultsOf(page: Page, faults: string[] = []): string[] {
  page.on('pageerror', error => faults.push(error.message))
  page.on('console', (message) => { if (message.type() === 'error') faults.push(message.text()) })
  return faults
}

/** Keeps a picture of the screen under tests/.artefacts (not in the repository), to be looked at: as it is seen on a phone, the whole page at a desk. */
export async function keepPicture(page: Page, name: string, fullPage = page.viewportSize()!.width > sizes.phone.viewport.width): Promise<void> {
  keepFile(`${name}.png`, await page.screenshot({ fullPage }))
}

/** Keeps a file there, to be opened by hand. */
export function keepFile(name: string, bytes: Buffer): void {
  const folder = path.resolve(import.meta.dirname, '../.artefacts')
  mkdirSync(folder, { recursive: true })
  writeFileSync(path.join(folder, name), bytes)
}
