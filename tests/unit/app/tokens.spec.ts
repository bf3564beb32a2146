import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'

const css = readFileSync(new URL('../../../app/assets/css/tokens.css', import.meta.url), 'utf8')

/** The custom properties and plain declarations of the one block with this selector. */
function blockOf(selector: string): Record<string, string> {
  const start = css.indexOf(`${selector} {`)
  expect(start, `${selector} stands in tokens.css`).toBeGreaterThanOrEqual(0)
  const body = css.slice(css.indexOf('{', start) + 1, css.indexOf('}', start)).replace(/\/\*.*?\*\//gs, '')
  return Object.fromEntries(body.split(';').map(line => line.split(':').map(part => part.trim())).filter(parts => parts.length === 2))
}

const daylight = blockOf(':root')
const themes = { daylight, sun: { ...daylight, ...blockOf('[data-theme=\'sun\']') }, dusk: { ...daylight, ...blockOf('[data-theme=\'dusk\']') } }

/** WCAG 2.2, "relative luminance": sRGB channels made linear, weighted 0.2126, 0.7152, 0.0722. */
function luminance(hex: string): number {
  const [red, green, blue] = [1, 3, 5].map(at => Number.parseInt(hex.slice(at, at + 2), 16) / 255)
    .map(c => c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4) as [number, number, number]
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue
}
/** WCAG 2.2, "contrast ratio": (L1 + 0.05) / (L2 + 0.05). */
function contrast(a: string, b: string): number {
  const [low, high] = [luminance(a), luminance(b)].sort((x, y) => x - y) as [number, number]
  return (high + 0.05) / (low + 0.05)
}

/** Text on its ground: WCAG 2.2, 1.4.3, level AA. */
const text: [string, string][] = [
  ['ink', 'page'], ['ink', 'paper'], ['ink', 'chalk'], ['soft', 'page'], ['soft', 'paper'], ['soft', 'chalk'],
  ['pine', 'page'], ['pine', 'paper'], ['pine', 'pine-wash'], ['on-pine', 'pine'],
  ['rust', 'page'], ['rust', 'paper'], ['rust', 'rust-wash'], ['on-rust', 'rust'],
  ['brass', 'page'], ['brass', 'paper'], ['brass', 'brass-wash'], ['slate', 'page'], ['slate', 'paper'],
  ['paper', 'ink'], ['chalk-mark', 'steel'],
]
/** Marks and edges of controls: WCAG 2.2, 1.4.11. */
const marks: [string, string][] = [['mark', 'paper'], ['mark', 'page'], ['mark', 'chalk'], ['focus-ring', 'page'], ['focus-ring', 'paper'], ['focus-ring', 'focus-ground'], ['steel', 'page'], ['steel', 'paper']]

describe('contrast', () => {
  it('is measured as WCAG does', () => {
    // Black on white is 21 by definition; 4.54 for #767676 on white is the figure WCAG's own techniques quote (FROM MEMORY, G18).
    expect(contrast('#000000', '#FFFFFF')).toBeCloseTo(21, 5)
    expect(contrast('#767676', '#FFFFFF')).toBeCloseTo(4.54, 2)
  })
})

describe.each(Object.entries(themes))('roles in %s', (_theme, roles) => {
  it.each(text)('%s can be read on %s', (front, ground) => {
    expect(contrast(roles[`--${front}`]!, roles[`--${ground}`]!)).toBeGreaterThanOrEqual(4.5)
  })
  it.each(marks)('%s can be seen on %s', (front, ground) => {
    expect(contrast(roles[`--${front}`]!, roles[`--${ground}`]!)).toBeGreaterThanOrEqual(3)
  })
})

describe('themes', () => {
  it('give every colour a value of their own', () => {
    const colours = Object.keys(daylight).filter(name => daylight[name]!.startsWith('#')).sort()
    for (const selector of ['[data-theme=\'sun\']', '[data-theme=\'dusk\']']) {
      expect(Object.entries(blockOf(selector)).filter(([, value]) => value.startsWith('#')).map(([name]) => name).sort()).toEqual(colours)
    }
  })
  it('are the same at dusk whether chosen or taken from the device', () => {
    expect(blockOf(':root:not([data-theme])')).toEqual(blockOf('[data-theme=\'dusk\']'))
  })
  it('draw lines twice as heavy in the sun', () => {
    for (const width of ['hair', 'line', 'heavy']) {
      expect(Number.parseFloat(themes.sun[`--w-${width}`]!)).toBe(2 * Number.parseFloat(daylight[`--w-${width}`]!))
    }
  })
})
