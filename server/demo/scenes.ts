import type { CONTACTS, DemoOrganisation } from './people'

/** How far a job of the demo has come. */
export type DemoStage = 'line' | 'begun' | 'walked' | 'correcting' | 'corrected' | 'waitsForPart' | 'offered' | 'signed' | 'interimSent' | 'finalSealed' | 'finalSent'

export interface DemoJob {
  title: string
  stage: DemoStage
  /** Days from today. */
  neededIn: number
  permit?: string
  checklists: string[]
  /** Typed as a tradesman would jot it down (shared/line/readQuickLine.ts). */
  line: string
}

export interface DemoClient {
  organisation: DemoOrganisation['key']
  name: string
  contacts: (keyof typeof CONTACTS)[]
  sites: { name: string, address: string, authority: string, jobs: DemoJob[] }[]
}

const SCHOOL = `all: 6 ft high, 2 in mesh, school, soft ground
A (Mill Road side): R1 84 ft run, up 11 in; G1 4 ft gate, self-closing, accessible route; R2 96 ft run, up 7 in; G2 8 ft double gate, exit; R3 92 ft run, down 13 in
B (Pool yard side): R4 110 ft run, down 10 in; R5 60 ft run, pool; G3 4 ft gate, pool, accessible route, self-closing; R6 108 ft run, pool, up 11 in`

const TOT_LOT = `all: 4 ft high, 2 in mesh, playground, soft ground
A (Path side): R1 48 ft run; G1 4 ft gate, self-closing, accessible route; R2 36 ft run
B (Grove side): R3 66 ft run, up 5 in; R4 40 ft run`

const DECK = `all: 5 ft high, 1 1/4 in mesh, pool, solid ground
A (Deck side): R1 40 ft run; G1 4 ft gate, self-closing, accessible route; R2 48 ft run`

const COURT = `all: 10 ft high, 1 3/4 in mesh, athletic, solid ground
A (Street side): R1 100 ft run; G1 4 ft gate, accessible route; R2 80 ft run
B (School side): R3 120 ft run; G2 12 ft double gate; R4 60 ft run`

const YARD = `all: 4 ft high, 1 1/4 in mesh, playground, school, soft ground
A (Street side): R1 54 ft run; G1 3 ft 6 in gate, self-closing; R2 62 ft run, up 4 in`

const STRETCH = `all: 6 ft high, 2 in mesh, school, soft ground
A: R1 120 ft run; G1 4 ft gate; R2 90 ft run`

/** Clients, sites and jobs in every state. */
export const CLIENTS: DemoClient[] = [
  {
    organisation: 'tarnbeck', name: 'Wrenfold School District', contacts: ['ruth', 'facilities', 'joss'],
    sites: [
      { name: 'Wrenfold Elementary', address: '40 Mill Road, Marl', authority: 'Velmor County', jobs: [{ title: 'Pool yard and Mill Road side', stage: 'waitsForPart', neededIn: 3, permit: 'HC-27-0093', checklists: ['school-grounds', 'pool-adjacent'], line: SCHOOL }] },
      { name: 'Bramble Street School', address: '7 Bramble Street, Marl', authority: 'Velmor County', jobs: [{ title: 'Ball court', stage: 'correcting', neededIn: 6, permit: 'HC-27-0101', checklists: ['school-grounds'], line: COURT }, { title: 'North stretch', stage: 'begun', neededIn: 12, checklists: ['school-grounds'], line: STRETCH }] },
      { name: 'Old Ferry Lane Day Care', address: '3 Old Ferry Lane, Marl', authority: 'Town of Marl', jobs: [{ title: 'Play yard', stage: 'corrected', neededIn: 8, checklists: ['playground'], line: YARD }] },
    ],
  },
  {
    organisation: 'tarnbeck', name: 'Velmor Swim Club', contacts: ['neve'],
    sites: [{ name: 'Velmor Swim Club', address: '12 Lido Lane, Velmor', authority: 'Velmor County', jobs: [{ title: 'Deck gates', stage: 'signed', neededIn: 4, permit: 'HC-27-0088', checklists: ['pool-adjacent'], line: DECK }, { title: 'Plant yard', stage: 'line', neededIn: 20, checklists: ['pool-adjacent'], line: DECK }] }],
  },
  {
    organisation: 'tarnbeck', name: 'Quillfeather Parks', contacts: ['abel'],
    sites: [{ name: 'Quillfeather Park', address: 'Grove Walk, Marl', authority: 'Town of Marl', jobs: [{ title: 'Tot lot', stage: 'interimSent', neededIn: 5, checklists: ['playground'], line: TOT_LOT }, { title: 'Upper lawn', stage: 'offered', neededIn: 15, checklists: ['playground'], line: TOT_LOT }] }],
  },
  {
    organisation: 'osprey', name: 'Wrenfold School District', contacts: ['ruth', 'facilities'],
    sites: [{ name: 'Saltmarsh Middle School', address: '88 Saltmarsh Road, Marl', authority: 'Velmor County', jobs: [{ title: 'Track and field', stage: 'finalSent', neededIn: -2, checklists: ['school-grounds'], line: STRETCH }, { title: 'Bus loop', stage: 'walked', neededIn: 9, checklists: ['school-grounds'], line: YARD }] }],
  },
]
