import type { Role } from '../../shared/drawing/displayList'

/** A letter sheet in points, as the design studies measure it (0.75 in left and right). */
export const PAPER = { width: 612, height: 792, left: 54, right: 558, top: 72, bottom: 718 } as const
/** Width between the margins. */
export const MEASURE = PAPER.right - PAPER.left

/** The daylight roles of app/assets/css/tokens.css on white paper (a test compares them). */
export const INKS: Record<Role, string> = {
  'page': '#F5F7F4', 'paper': '#FFFFFF', 'ink': '#14211D', 'soft': '#465650', 'line': '#C3CCC6', 'mark': '#6F7E77',
  'pine': '#0E5A43', 'on-pine': '#FFFFFF', 'rust': '#9C3715', 'on-rust': '#FFFFFF', 'brass': '#7A5900', 'slate': '#51606A',
  'chalk': '#DCE5DF', 'pine-wash': '#E2EEE7', 'rust-wash': '#F7E9E2', 'brass-wash': '#F4ECD5',
  'steel': '#3B4843', 'steel-edge': '#14211D', 'chalk-mark': '#FBFCF8', 'focus-ring': '#14211D', 'focus-ground': '#FFD24A',
}

const COLOURS = new Map(Object.entries(INKS).map(([role, hex]) => [role, [1, 3, 5].map(at => decimal(Number.parseInt(hex.slice(at, at + 2), 16) / 255)).join(' ')]))
/** The three numbers that PDF colour operators take. */
export const colour = (role: Role): string => COLOURS.get(role)!

/** A number as content streams hold it: at most three decimals, never an exponent. */
export function decimal(value: number): string {
  const rounded = Math.round(value * 1000) / 1000
  return Object.is(rounded, -0) ? '0' : String(rounded)
}
