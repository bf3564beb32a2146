import type { Config } from 'tailwindcss'

/** Roles only: every colour is a custom property of app/assets/css/tokens.css, so the three themes need no variants. */
const role = (name: string) => `var(--${name})`
const roles = ['page', 'paper', 'ink', 'soft', 'line', 'mark', 'pine', 'on-pine', 'rust', 'on-rust', 'brass', 'slate', 'chalk', 'pine-wash', 'rust-wash', 'brass-wash', 'steel']

export default {
  content: [],
  theme: {
    colors: { transparent: 'transparent', current: 'currentColor', ...Object.fromEntries(roles.map(name => [name, role(name)])) },
    borderRadius: { none: '0' },
    boxShadow: { none: 'none' },
    fontFamily: { sans: ['Lexend', 'sans-serif'] },
    fontSize: {
      note: ['14px', '1.4'], body: ['16px', '1.5'], field: ['18px', '1.5'], lead: ['22px', '1.35'],
      head: ['28px', '1.2'], figure: ['40px', '1.1'], plate: ['56px', '1.1'],
    },
    fontWeight: { light: '300', normal: '400', medium: '500', semibold: '600' },
    spacing: { 0: '0', px: '1px', 1: '4px', 2: '8px', 3: '12px', 4: '16px', 5: '24px', 6: '32px', 7: '48px', 8: '64px', touch: 'var(--touch)', field: 'var(--touch-field)' },
    extend: { borderWidth: { hair: 'var(--w-hair)', line: 'var(--w-line)', heavy: 'var(--w-heavy)' } },
  },
} satisfies Partial<Config>
