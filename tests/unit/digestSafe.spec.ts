import { readdirSync, readFileSync } from 'node:fs'
import { expect, it } from 'vitest'

/**
 * Digests are worked out on phones, tablets and servers and must agree (contracts.md 4): engines differ in sin, atan2, exp, log and hypot, locales in Intl and
 * localeCompare, and clocks and dice are no input. In these rooms nothing of the kind is called at all.
 */
const ROOMS = ['entry', 'round', 'limit', 'measure', 'record']
const BANNED = /\bMath\s*\.\s*(?:a?(?:sin|cos|tan)h?|atan2|exp|expm1|log|log2|log10|log1p|hypot|pow|cbrt|random)\b|\bIntl\b|\blocaleCompare\b|\btoLocale\w*\b|\bDate\s*\.\s*now\b|\bnew\s+Date\s*\(\s*\)|\bperformance\s*\.\s*now\b|\bcrypto\s*\.\s*(?:randomUUID|getRandomValues)\b/
/** Files that may, with the reason; nothing in these rooms may build on them. */
const ALLOWED: Record<string, string> = {
  'limit/conformanceProbability.ts': 'A view of the office, shown and never stored or compared.',
}

const withoutComments = (source: string) => source.replace(/\/\*[\s\S]*?\*\/|(^|[^:])\/\/.*$/gm, '$1')

it.each(ROOMS)('computes nothing in shared/%s that another engine, place or hour would compute otherwise', (room) => {
  const folder = new URL(`../../shared/${room}/`, import.meta.url)
  const files = readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter(name => name.endsWith('.ts'))
  expect(files.length).toBeGreaterThan(0)
  for (const name of files) {
    if (ALLOWED[`${room}/${name}`]) continue
    const source = withoutComments(readFileSync(new URL(name, folder), 'utf8'))
    for (const allowed of Object.keys(ALLOWED)) expect(source, `shared/${room}/${name}`).not.toContain(`/${allowed.split('/')[1]!.replace('.ts', '')}'`)
    const found = source.split('\n').findIndex(line => BANNED.test(line))
    expect(found < 0 ? null : `shared/${room}/${name}:${found + 1}`).toBeNull()
  }
})

it('would notice each of the banned calls', () => {
  for (const call of ['Math.sin(x)', 'Math.atan2(y, x)', 'Math.exp(1)', 'Math.log(2)', 'Math.hypot(3, 4)', 'new Intl.Collator()', 'a.localeCompare(b)', 'Date.now()', 'Math.random()', 'new Date()', 'n.toLocaleString()']) expect(call).toMatch(BANNED)
  for (const call of ['Math.max(1, 2)', 'Math.abs(x)', 'new Date(text)', 'Math.round(x)', 'logEntry(x)']) expect(call).not.toMatch(BANNED)
})
