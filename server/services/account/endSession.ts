import { entrance } from '../../database/entrance'

/** Ends one session or all of an account's; the cookies of the others are worth nothing from the next request on. */
export async function endSession(who: { accountId: string, tokenHash: string }, everywhere: boolean): Promise<void> {
  await (everywhere ? entrance.endAllSessions(who.accountId) : entrance.endSession(who.tokenHash))
}
