import type { Me } from '#shared/api/account'

const KEY = 'smoothside-field-profile'
const COUNT = 'smoothside-field-waiting'

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

/** How many entries of that person wait on this device, as last counted; told on signing out. */
export function countKept(waiting: number): void {
  try {
    localStorage.setItem(COUNT, String(waiting))
  }
  catch {
    // As above.
  }
}

/** On signing out: the next person on this device sees nothing of the one before. What waits stays in that person's own database; answers how many that are. */
export function forgetProfile(): number {
  try {
    const kept = Number(localStorage.getItem(COUNT)) || 0
    localStorage.removeItem(KEY)
    localStorage.removeItem(COUNT)
    return kept
  }
  catch {
    return 0
  }
}

/** Whether two profiles are the same person acting for the same organisation in the same standing. */
export function sameProfile(one: Me | null, other: Me | null): boolean {
  return one?.account.id === other?.account.id && one?.organisation?.id === other?.organisation?.id && one?.standing === other?.standing && one?.role === other?.role
}
