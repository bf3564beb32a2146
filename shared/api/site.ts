import { z } from 'zod'

const line = (max: number) => z.string().trim().max(max)
const id = z.string().uuid()

export const idParamsSchema = (name: string) => z.object({ [name]: id }).strict()

export const clientInputSchema = z.object({ id, name: line(160).min(1), address: line(300) }).strict()
export const contactInputSchema = z.object({
  id, name: line(120).min(1), email: z.string().trim().toLowerCase().email().max(200), phone: line(40), title: line(120),
  accepts: z.boolean(), mailbox: z.boolean(),
}).strict().refine(contact => !(contact.mailbox && contact.accepts), { path: ['accepts'], message: 'A role\'s mailbox is nobody in particular: it cannot accept for the owner.' })
export const siteInputSchema = z.object({ id, clientId: id, name: line(160).min(1), address: line(300), timeZone: line(60).min(1), authorityId: id.nullable() }).strict()
export const authorityInputSchema = z.object({ id, name: line(160).min(1) }).strict()
export type ClientInput = z.infer<typeof clientInputSchema>
export type ContactInput = z.infer<typeof contactInputSchema>
export type SiteInput = z.infer<typeof siteInputSchema>

export interface ContactRow extends ContactInput { accountId: string | null }
export interface ClientRow extends ClientInput { contacts: ContactRow[], sites: { id: string, name: string }[] }
export interface SiteRow extends SiteInput { clientName: string, authorityName: string | null, jobs: number }
