import { canonicalJson } from '../../../shared/record/canonicalJson'
import { entrance } from '../../database/entrance'
import { lockRound } from '../../database/queries/entry'
import { openRounds } from '../../database/queries/round'
import * as states from '../../database/queries/state'
import { forOrganisation, withSession } from '../../database/withSession'
import { keepState } from './keepState'

/** Folds every open round again and writes what lists show; tells how many differed. What is kept may always be thrown away and made anew. */
export async function refoldAll(): Promise<{ rounds: number, changed: number }> {
  let rounds = 0
  let changed = 0
  for (const organisationId of await entrance.organisationIds()) {
    const session = forOrganisation(organisationId)
    for (const roundId of await withSession(session, openRounds)) {
      const differed = await withSession(session, async (tx) => {
        const round = await lockRound(tx, roundId)
        if (!round || round.accepted === 0) return null
        const before = await states.readOutcome(tx, roundId)
        await states.forgetState(tx, roundId)
        await keepState(tx, round, [])
        const after = await states.readOutcome(tx, roundId)
        return canonicalJson(before) !== canonicalJson(after)
      })
      if (differed === null) continue
      rounds++
      if (differed) changed++
    }
  }
  return { rounds, changed }
}
