/** The three lights a screen is read in; nothing chosen follows the device (dusk where it is dark). */
export const THEMES = ['daylight', 'sun', 'dusk'] as const
export type Theme = (typeof THEMES)[number]

const YEAR = 60 * 60 * 24 * 365

/** Theme and rain mode. Both live in cookies, so that the server already renders them and no page flashes. */
export function useTheme() {
  const kept = { maxAge: YEAR, sameSite: 'lax', path: '/' } as const
  const cookie = useCookie<string | null>('smoothside-theme', { ...kept, default: () => null })
  const rainCookie = useCookie<string | null>('smoothside-rain', { ...kept, default: () => null })

  /** Null: as the device has it. */
  const theme = computed<Theme | null>({
    get: () => THEMES.find(name => name === cookie.value) ?? null,
    set: (name) => { cookie.value = name },
  })
  /** Wet gloves: keys of 72 px, verdict keys held half a second. Field screens alone obey it. */
  const rain = computed<boolean>({
    get: () => rainCookie.value === 'on',
    set: (on) => { rainCookie.value = on ? 'on' : null },
  })
  return { theme, rain }
}
