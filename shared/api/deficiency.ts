import { z } from 'zod'
import type { Both, DeficiencyClass } from '../checklist/check'
import { DEFICIENCY_CLASSES } from '../checklist/check'
import type { KeptEntry, Place } from '../entry/entry'
import { PAYLOADS } from '../entry/entry'
import type { Unit } from '../limit/limit'
import type { System } from '../measure/length'
import type { DeficiencyOutcome, DeficiencyState } from '../round/outcome'

/** Which tags a list holds. `open` is all that have not come to an end. */
export const TAG_FILTERS = ['open', 'toCorrect', 'waiting', 'offered', 'corrected', 'settled'] as const
export type TagFilter = (typeof TAG_FILTERS)[number]
export const TAG_SORTS = ['due', 'job', 'tag', 'class', 'state'] as const
export type TagSort = (typeof TAG_SORTS)[number]

const line = (max: number) => z.string().trim().max(max)
/** Query of GET /api/deficiencies and /api/tables/tags/:as. `after` is the `next` of the page before. */
export const tagListSchema = z.object({
  find: line(100).default(''),
  filter: z.enum(TAG_FILTERS).default('open'),
  class: z.enum(DEFICIENCY_CLASSES).optional(),
  /** An account, or nobody. */
  given: z.union([z.string().uuid(), z.literal('nobody')]).optional(),
  jobId: z.string().uuid().optional(),
  overdue: z.literal('yes').optional(),
  sort: z.enum(TAG_SORTS).default('due'),
  descending: z.literal('yes').optional(),
  after: z.string().max(200).optional(),
  most: z.coerce.number().int().min(1).max(200).default(50),
}).strict()
export type TagListQuery = z.infer<typeof tagListSchema>

/** A tag of any job as a list shows it. */
export interface TagListRow {
  id: string, tag: string, class: DeficiencyClass, state: DeficiencyState, place: Place | null, held: DeficiencyOutcome['held'], waitsFor: string | null, until: string | null
  jobId: string, jobCode: string, jobTitle: string, siteName: string, system: System
  /** Empty where the element was struck from the line. */
  elementTag: string
  checkId: string
  /** Null where no checklist here has the check. */
  title: Both | null
  unit: Unit | null
  /** Who is to correct it, also somebody without an account. */
  givenTo: string | null
  due: string | null
}
export interface TagListPage { rows: TagListRow[], next: string | null, counts: Record<TagFilter | 'overdue', number> }

export const tagIdSchema = z.object({ deficiencyId: z.string().uuid() }).strict()
/** Answer of GET /api/deficiencies/:deficiencyId: what happened, in its order, and who is named. */
export interface TagPage { row: TagListRow, entries: KeptEntry[], people: Record<string, string> }

const { to, due, words } = PAYLOADS.assignment.shape
/** Body of POST /api/deficiencies/assignments. Each tag brings the id of its entry, so that a repeat is the same word. */
export const assignTagsSchema = z.object({
  tags: z.array(z.object({ deficiencyId: z.string().uuid(), entryId: z.string().uuid() }).strict()).min(1).max(100),
  to, due, words,
}).strict()
export type AssignTags = z.infer<typeof assignTagsSchema>
/** What became of each: written, or why not. */
export interface AssignTagsAnswer { written: string[], refused: { deficiencyId: string, code: 'notFound' | 'ended' | 'sealed' | 'stale' }[] }
