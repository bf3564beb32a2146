import { DEFICIENCY_CLASSES } from '../checklist/check'
import type { Both, Check, Checklist } from '../checklist/check'
import { compileCondition } from '../checklist/condition'
import type { ConditionTree } from '../checklist/condition'
import type { Limit, Unit } from '../limit/limit'
import type { Setting } from '../line/line'

/** One thing that an authority can put a number on, for the page "Numbers this authority enforces". */
export interface SettingMeasurand {
  measurand: string
  datum: string
  unit: Unit
  /** Checks that take it, in the order of the checklists; their titles name the row. */
  checks: { id: string, title: Both }[]
  /** Built-in limits that can hold in this setting, each with its basis and the condition under which it does. */
  builtIn: (Limit & { when?: string })[]
  /** Why no built-in limit stands, where one is wanted and missing for all or some places. */
  noLimit: Both | null
  /** Published statements that speak of it, to be offered for adoption. */
  sources: string[]
  /** The gravest class among its checks: how much hangs on the number. */
  class: Check['class']
}

/** Three-valued: what a condition comes to when the setting is there and nothing else is known (null). */
function given(tree: ConditionTree, setting: Setting): boolean | null {
  switch (tree.op) {
    case 'not': {
      const of = given(tree.of, setting)
      return of === null ? null : !of
    }
    case 'and': case 'or': {
      const decides = tree.op === 'or'
      const of = tree.of.map(part => given(part, setting))
      return of.includes(decides) ? decides : of.includes(null) ? null : !decides
    }
    case 'contains': return tree.value === setting ? true : null
    default: return null
  }
}

const settingsNamed = (tree: ConditionTree): string[] =>
  tree.op === 'contains' ? [tree.value] : tree.op === 'not' ? settingsNamed(tree.of) : 'fact' in tree ? [] : tree.of.flatMap(settingsNamed)

/** Whether a limit belongs on the page of a setting: it can hold there, and its condition does not speak of other settings alone. */
function belongsTo(when: string | undefined, setting: Setting): boolean {
  if (when === undefined) return true
  const { tree } = compileCondition(when)
  const named = settingsNamed(tree)
  return (named.length === 0 || named.includes(setting)) && given(tree, setting) !== false
}

/** All measurands that a setting calls for in these checklists, in the order of the checks: one row a measurand and datum, all on one page. */
export function measurandsOfSetting(setting: Setting, checklists: readonly Checklist[]): SettingMeasurand[] {
  const rows = new Map<string, SettingMeasurand>()
  const seen = new Set<string>()
  for (const check of checklists.flatMap(checklist => checklist.checks)) {
    const { measurand, datum, unit } = check
    if (measurand === undefined || datum === undefined || unit === undefined || seen.has(check.id)) continue
    if (check.settings.length > 0 && !check.settings.includes(setting)) continue
    seen.add(check.id)
    // A gauge that stands for no figure (the three projection gauges) leaves nothing to set.
    if (check.method === 'template' && check.limits.length === 0) continue
    const key = `${measurand} ${datum}`
    const row = rows.get(key) ?? { measurand, datum, unit, checks: [], builtIn: [], noLimit: null, sources: [], class: check.class }
    rows.set(key, row)
    row.checks.push({ id: check.id, title: check.title })
    row.builtIn.push(...check.limits.filter(limit => belongsTo(limit.when, setting) && !row.builtIn.some(one => one.id === limit.id)))
    row.noLimit ??= check.noLimit ?? null
    row.sources.push(...(check.sources ?? []).filter(id => !row.sources.includes(id)))
    if (DEFICIENCY_CLASSES.indexOf(check.class) < DEFICIENCY_CLASSES.indexOf(row.class)) row.class = check.class
  }
  return [...rows.values()]
}
