import type { Me } from '#shared/api/account'

const KEY = 'smoothside-field-profile'

/**
 * Who may use the field pages of this device with no signal: the person who was signed in when they last opened with one. Kept beside, not in, the
 * person's own database, since its name is only known from here.
 */
export function keptProfile(): Me | null {
  try {
    return JSON.parse(localStorage.getItem(KEY) ?? 'null') as Me | null
  }
  catch {
    return null
  }
}

export function keepProfile(me: Me): void {
  try {
    localStorage.setItem(KEY, JSON.stringify(me))
  }
  catch {
    // A shut storage is told where something is to be written down.
  }
}

/** On signing out: the next person on this device sees nothing of the one before. What waits stays in that person's own database. */
export function forgetProfile(): void {
  try {
    localStorage.removeItem(KEY)
  }
  catch {
    // Nothing was kept there.
  }
}

/** Whether two profiles are the same person acting for the same organisation in the same standing. */
export function sameProfile(one: Me | null, other: Me | null): boolean {
  return one?.account.id === other?.account.id && one?.organisation?.id === other?.organisation?.id && one?.standing === other?.standing && one?.role === other?.role
}
