/** Roles of people in an organisation; `client` is a contact's standing with every contractor that names it. */
export const ROLES = ['inspector', 'crew', 'manager', 'administrator'] as const
export type Role = (typeof ROLES)[number]
export const STANDINGS = ['staff', 'crew', 'client'] as const
export type Standing = (typeof STANDINGS)[number]
export type Actor = Role | 'client'

const office: Actor[] = ['manager', 'administrator']
const staff: Actor[] = ['inspector', 'manager', 'administrator']
const field: Actor[] = ['inspector', 'crew', 'manager', 'administrator']
const everyone: Actor[] = [...field, 'client']

/**
 * Who may do what: the one table that routes, screens and tests read. Whether a row is theirs to see is the database's to say;
 * this table says only which kind of person may try.
 */
export const PERMISSIONS = {
  'account.own': everyone,
  'client.read': staff,
  'client.write': office,
  'site.read': field,
  'site.write': office,
  'numbers.read': staff,
  'numbers.write': office,
  'question.read': staff,
  'question.write': office,
  'checklist.read': field,
  'job.read': field,
  'job.write': office,
  'line.write': staff,
  'trial.read': staff,
  'trial.write': staff,
  'round.read': field,
  'round.take': field,
  'round.basis': office,
  'entry.send': field,
  'photo.send': field,
  'photo.read': everyone,
  'deficiency.assign': staff,
  'record.seal': office,
  'record.read': [...staff, 'client'],
  'record.standing': office,
  'transmittal.send': office,
  'acceptance.write': ['client'],
  'portal.read': ['client'],
  'people.read': staff,
  'people.write': ['administrator'],
} as const satisfies Record<string, readonly Actor[]>
export type Permission = keyof typeof PERMISSIONS

/** Whether that kind of person may try that. */
export function may(actor: Actor, permission: Permission): boolean {
  return (PERMISSIONS[permission] as readonly Actor[]).includes(actor)
}
