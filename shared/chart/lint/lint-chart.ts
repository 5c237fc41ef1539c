import type { ChartLookup } from '../chart-set.ts'
import type { ChartIndex } from '../graph.ts'
import { accessRings, needsClash, sharedAccess, unusedAccess } from './access.ts'
import { lintContext, type Rule } from './context.ts'
import { jumps, returningRings } from './jumps.ts'
import { references, uniqueIds } from './names.ts'
import { outcomes, sameCheck } from './outcomes.ts'
import { causesProven, proofAccess, proofs, remedies } from './proofs.ts'
import { bands, units } from './readings.ts'
import { inOrder, type Remark } from './remark.ts'
import { edges, ends, onlyFor, reachability } from './routes.ts'
import { restoring, runningEngine, signalWords } from './safety.ts'
import { silentRings } from './silent-rings.ts'
import { allGood, reproducing } from './starts.ts'
import { values, wording } from './wording.ts'

/** What the chart check knows beside the chart. */
export type LintOptions = {
  /** Finds joined charts: published versions, drafts published in the same act, files beside this one. It need not hold the chart itself. */
  readonly others?: ChartLookup
  /** What a jump to a chart that `others` lacks means: not published yet (a warning), or, on the command line, not beside the file (a note). */
  readonly missing?: 'not-published' | 'not-beside'
}

/**
 * The chart check: everything it has to say about a chart, errors before warnings before notes, within those in the order
 * of the nodes. Near-linear in the size of the chart and of the charts joined to it.
 */
export function lintChart(index: ChartIndex, options: LintOptions = {}): Remark[] {
  const context = lintContext(index, options.others ?? (() => undefined))
  const rules: readonly Rule[] = [
    uniqueIds,
    reachability,
    edges,
    ends,
    onlyFor,
    silentRings,
    references,
    outcomes,
    sameCheck,
    bands,
    units,
    accessRings,
    needsClash,
    jumps(options.missing === 'not-beside' ? 'jump-chart-not-beside' : 'jump-chart-missing'),
    returningRings,
    restoring,
    signalWords,
    proofs,
    causesProven,
    reproducing,
    runningEngine,
    allGood,
    remedies,
    unusedAccess,
    sharedAccess,
    wording,
    values,
    proofAccess,
  ]
  return inOrder(
    rules.flatMap((rule) => [...rule(context)]),
    index.order,
  )
}

/** Whether remarks forbid publishing. */
export function hasErrors(remarks: readonly Remark[]): boolean {
  return remarks.some((entry) => entry.severity === 'error')
}
