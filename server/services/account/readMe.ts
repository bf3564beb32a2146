import type { Me } from '../../../shared/api/account'
import { entrance } from '../../database/entrance'

interface Who { accountId: string, email: string, name: string, language: 'en' | 'es', standing: Me['standing'], role: Me['role'], organisationId: string | null, organisationName: string | null }

/** Who the session is, and as what else the person may act. */
export async function readMe(who: Who): Promise<Me> {
  const standings = await entrance.standingsOf(who.accountId)
  return {
    account: { id: who.accountId, email: who.email, name: who.name, language: who.language },
    standing: who.standing,
    role: who.role,
    organisation: who.organisationId ? { id: who.organisationId, name: who.organisationName! } : null,
    standings: standings.map(one => ({ standing: one.standing, organisationId: one.organisation_id, organisationName: one.organisation_name, role: one.role })),
  }
}
