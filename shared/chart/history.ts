import { ok, type Result } from '#shared/lib/result.ts'
import type { ChartCommand } from './commands.ts'
import type { ChartDocument } from './document.ts'
import { applyCommand } from './edit.ts'
import type { EditRefusal } from './edit-checks.ts'

/** Most steps that can be undone; older ones are forgotten. Documents share what did not change between them, so a step is cheap. */
export const mostSteps = 500

/** An edited chart with the documents before and after it. `gesture` names what the last edit was part of. */
export type ChartHistory = {
  readonly past: readonly ChartDocument[]
  readonly present: ChartDocument
  readonly future: readonly ChartDocument[]
  readonly gesture: string | null
}

/** A history that begins with a chart as it was opened. */
export function startHistory(chart: ChartDocument): ChartHistory {
  return { past: [], present: chart, future: [], gesture: null }
}

/**
 * Makes an edit and remembers the document before it. Edits in a row that name the same gesture (a drag, a burst of arrow
 * keys, the typing of one title) are undone together; `endGesture` or any other edit ends it. An edit that changes nothing
 * is no step, and a new edit ends what could be redone.
 */
export function applyToHistory(history: ChartHistory, command: ChartCommand, options: { readonly gesture?: string } = {}): Result<ChartHistory, EditRefusal> {
  const edited = applyCommand(history.present, command)
  if (!edited.ok) return edited
  if (edited.value === history.present) return ok(history)
  const gesture = options.gesture ?? null
  const isSameGesture = gesture !== null && gesture === history.gesture
  const past = isSameGesture ? history.past : [...history.past, history.present].slice(-mostSteps)
  return ok({ past, present: edited.value, future: [], gesture })
}

/** Ends a gesture, so that the next edit is a step of its own whatever it names. */
export function endGesture(history: ChartHistory): ChartHistory {
  return history.gesture === null ? history : { ...history, gesture: null }
}

/** Goes back one step; at the first document it changes nothing. */
export function undo(history: ChartHistory): ChartHistory {
  const present = history.past.at(-1)
  return present === undefined ? history : { past: history.past.slice(0, -1), present, future: [history.present, ...history.future], gesture: null }
}

/** Goes forward one step that was undone; where none was, it changes nothing. */
export function redo(history: ChartHistory): ChartHistory {
  const [present, ...future] = history.future
  return present === undefined ? history : { past: [...history.past, history.present], present, future, gesture: null }
}
