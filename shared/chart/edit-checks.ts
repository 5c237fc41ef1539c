import type { ZodType } from 'zod'
import { err, ok, type Result } from '#shared/lib/result.ts'
import type { EdgeStart } from './commands.ts'
import type { ChartDocument } from './document.ts'
import { toFieldProblem, type FieldProblem } from './parse-words.ts'

/** Why an edit was not made. The chart is as it was; `errors` name the fields at fault where the words came from the schema. */
export type EditRefusal = {
  readonly code: 'no-such-node' | 'no-such-outcome' | 'no-such-edge' | 'no-such-entry' | 'id-taken' | 'has-no-outcomes' | 'invalid'
  readonly detail: string
  readonly errors: readonly FieldProblem[]
}

/** What an edit of a part gives: the part, the very same one if nothing changed, or a refusal. */
export type Edited<T = ChartDocument> = Result<T, EditRefusal>

/** Applies a patch to an object and takes the fields it changes from the schema; fields that it does not name stay the same objects. */
export function patched<T extends object>(whole: T, patch: object, schema: ZodType): Edited<T> {
  const before = whole as Readonly<Record<string, unknown>>
  const fields = Object.entries(patch).filter(([field, value]) => value !== undefined && before[field] !== (value ?? undefined))
  if (fields.length === 0) return ok(whole)
  const gone = fields.filter(([, value]) => value === null).map(([field]) => field)
  const changed = fields.filter(([, value]) => value !== null)
  const good = checked(schema, { ...without(whole, gone), ...Object.fromEntries(changed) })
  if (!good.ok) return good
  return ok({
    ...without(whole, gone),
    ...only(
      good.value as object,
      changed.map(([field]) => field),
    ),
  })
}

/** Sends a value through a schema and takes it from there. */
export function checked<T>(schema: ZodType<T>, value: unknown): Edited<T> {
  const parsed = schema.safeParse(value)
  if (parsed.success) return ok(parsed.data)
  const errors = parsed.error.issues.map((issue) => toFieldProblem(issue, value))
  return err({ code: 'invalid', detail: errors[0]?.detail ?? 'This cannot stand in a chart.', errors })
}

/** Makes edits one after the other; the first refusal refuses them all. */
export function chain<T>(items: readonly T[], chart: ChartDocument, edit: (chart: ChartDocument, item: T) => Edited): Edited {
  return items.reduce<Edited>((at, item) => (at.ok ? edit(at.value, item) : at), ok(chart))
}

/** An object without some of its fields. */
export function without<T extends object>(whole: T, fields: readonly string[]): T {
  return Object.fromEntries(Object.entries(whole).filter(([field]) => !fields.includes(field))) as T
}

/** An object with some of its fields only. */
export function only<T extends object>(whole: T, fields: readonly string[]): T {
  return Object.fromEntries(Object.entries(whole).filter(([field]) => fields.includes(field))) as T
}

/** Refuses an edit in words. */
export function refuse(code: EditRefusal['code'], detail: string): { readonly ok: false; readonly error: EditRefusal } {
  return err({ code, detail, errors: [] })
}

/** Refuses: the chart has no such node. */
export const noNode = (id: string) => refuse('no-such-node', `This chart has no node ${id}.`)
/** Refuses: the node has no such outcome, or an edge names none where it must. */
export const noOutcome = (id: string, outcome: string | undefined) =>
  refuse('no-such-outcome', outcome === undefined ? `An edge of node ${id} begins at one of its outcomes.` : `Node ${id} has no outcome ${outcome}.`)
/** Refuses: no edge begins there. */
export const noEdge = (start: EdgeStart) =>
  refuse('no-such-edge', `No edge leads on from ${start.outcome === undefined ? '' : `outcome ${start.outcome} of `}node ${start.from}.`)
/** Refuses: something else has this id. */
export const idTaken = (id: string) => refuse('id-taken', `The id ${id} is taken. Choose another.`)
