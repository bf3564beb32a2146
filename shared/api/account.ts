import { z } from 'zod'
import { ROLES, STANDINGS } from '../permission/permission'

const email = z.string().trim().toLowerCase().email().max(200)
/** At least 12 characters, no other rule: length is what counts. */
export const passwordSchema = z.string().min(12).max(200)

export const signInSchema = z.object({ email, password: z.string().min(1).max(200) }).strict()
export const resetRequestSchema = z.object({ email }).strict()
export const tokenSchema = z.object({ token: z.string().regex(/^[\w-]{43}$/) }).strict()
/** Redeeming: an invitation or reset sets a password, a contact's link needs none. */
export const redeemSchema = z.object({ name: z.string().trim().min(1).max(120).optional(), password: passwordSchema.optional() }).strict()
export const actForSchema = z.object({ standing: z.enum(STANDINGS), organisationId: z.string().uuid().nullable() }).strict()
export const profileSchema = z.object({ name: z.string().trim().min(1).max(120).optional(), language: z.enum(['en', 'es']).optional() }).strict()
export const passwordChangeSchema = z.object({ now: z.string().min(1).max(200), next: passwordSchema }).strict()
export const invitationSchema = z.object({ email, name: z.string().trim().min(1).max(120), role: z.enum(ROLES), language: z.enum(['en', 'es']).default('en') }).strict()
export const roleChangeSchema = z.object({ role: z.enum(ROLES).nullable() }).strict()

/** Answer of GET /api/account/me. */
export interface Me {
  account: { id: string, email: string, name: string, language: 'en' | 'es' }
  standing: (typeof STANDINGS)[number]
  role: (typeof ROLES)[number] | null
  organisation: { id: string, name: string } | null
  standings: { standing: (typeof STANDINGS)[number], organisationId: string | null, organisationName: string, role: (typeof ROLES)[number] | null }[]
}
