import type { Role } from '../../shared/permission/permission'

/** The demo is a scenario of our own: nobody and nothing in it exists. One password for all, printed at the start. */
export const DEMO_PASSWORD = 'walk the whole line'

export interface DemoOrganisation { key: 'tarnbeck' | 'osprey', name: string, code: string, timeZone: string, phone: string, people: { key: string, name: string, email: string, role: Role, language: 'en' | 'es' }[] }

export const ORGANISATIONS: DemoOrganisation[] = [
  {
    key: 'tarnbeck', name: 'Tarnbeck Fence & Gate', code: 'TFG', timeZone: 'America/New_York', phone: '(555) 010-0110',
    people: [
      { key: 'margit', name: 'Margit Hale', email: 'margit@tarnbeck.example', role: 'manager', language: 'en' },
      { key: 'dana', name: 'Dana Okafor', email: 'dana@tarnbeck.example', role: 'inspector', language: 'en' },
      { key: 'luis', name: 'Luis Barrientos', email: 'luis@tarnbeck.example', role: 'crew', language: 'es' },
      { key: 'ines', name: 'Ines Tamm', email: 'ines@tarnbeck.example', role: 'administrator', language: 'en' },
    ],
  },
  {
    key: 'osprey', name: 'Osprey Wire & Post', code: 'OWP', timeZone: 'America/New_York', phone: '(555) 010-0170',
    people: [
      { key: 'piet', name: 'Piet Ravndal', email: 'piet@osprey.example', role: 'manager', language: 'en' },
      { key: 'sol', name: 'Sol Amaya', email: 'sol@osprey.example', role: 'inspector', language: 'es' },
      { key: 'kofi', name: 'Kofi Brandt', email: 'kofi@osprey.example', role: 'crew', language: 'en' },
      { key: 'una', name: 'Una Westerby', email: 'una@osprey.example', role: 'administrator', language: 'en' },
    ],
  },
]

/** Contacts at clients; the clerk is one of both contractors and signs in once. */
export const CONTACTS = {
  ruth: { name: 'Ruth Adeyemi', email: 'ruth@wrenfold.example', title: 'Facilities manager', phone: '(555) 010-0142', accepts: true, mailbox: false },
  facilities: { name: 'Facilities mailbox', email: 'facilities@wrenfold.example', title: '', phone: '', accepts: false, mailbox: true },
  joss: { name: 'Joss Marchetti', email: 'joss@wrenfold.example', title: 'Custodian', phone: '(555) 010-0117', accepts: false, mailbox: false },
  neve: { name: 'Neve Calloway', email: 'neve@velmorswim.example', title: 'Club secretary', phone: '(555) 010-0155', accepts: true, mailbox: false },
  abel: { name: 'Abel Quist', email: 'abel@quillfeather.example', title: 'Parks supervisor', phone: '(555) 010-0161', accepts: true, mailbox: false },
} as const
