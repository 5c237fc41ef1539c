import type { ZodType } from 'zod'
import { assertNever } from '#shared/lib/assert-never.ts'
import { ok } from '#shared/lib/result.ts'
import type { ChartCommand, ChartField, EntryList, EntryLists } from './commands.ts'
import {
  accessSchema,
  causeSchema,
  cautionSchema,
  chartDocumentSchema,
  nodeSchema,
  outcomeSchema,
  serviceItemSchema,
  specKeySchema,
  type ChartDocument,
  type Outcome,
} from './document.ts'
import { chain, checked, idTaken, only, patched, refuse, without, type Edited } from './edit-checks.ts'
import {
  addNodes,
  connect,
  disconnect,
  editNode,
  editOutcome,
  editOutcomes,
  insertNode,
  move,
  moved,
  place,
  removeNode,
  removeOutcome,
  replaceNode,
} from './edit-nodes.ts'

/**
 * Makes one edit. Pure: the chart stays untouched, and whatever the edit does not concern is the very same object in the
 * new one, so that a stack of documents is a history and an unchanged node need not be drawn again. A command that changes
 * nothing returns the chart itself. What comes out always passes the door again; whether it makes sense is for the chart check.
 */
export function applyCommand(chart: ChartDocument, command: ChartCommand): Edited {
  switch (command.type) {
    case 'set-chart':
      return setChart(chart, command.patch)
    case 'add-nodes':
      return addNodes(chart, command.nodes, command.edges ?? [], command.positions ?? {})
    case 'insert-node':
      return insertNode(chart, command.node, command.into, command.position)
    case 'remove-nodes':
      return chain([...new Set(command.nodeIds)], chart, (at, id) => removeNode(at, id, command.closeGap === true))
    case 'rename-node':
      return editNode(chart, command.nodeId, (node) => patched(node, { title: command.title }, nodeSchema))
    case 'set-node':
      return editNode(chart, command.nodeId, (node) => patched(node, without(command.patch, ['id', 'kind', 'outcomes']), nodeSchema))
    case 'replace-node':
      return replaceNode(chart, command.node)
    case 'connect':
      return connect(chart, command, command.to)
    case 'disconnect':
      return disconnect(chart, command)
    case 'add-outcome':
      return editOutcomes(chart, command.nodeId, (outcomes) => {
        const added = checked(outcomeSchema, command.outcome)
        if (!added.ok) return added
        return outcomes.some((outcome) => outcome.id === added.value.id)
          ? idTaken(added.value.id)
          : ok(outcomes.toSpliced(Math.max(0, command.at ?? outcomes.length), 0, added.value))
      })
    case 'set-outcome':
      return editOutcome(chart, command.nodeId, command.outcomeId, (outcomes, place) => {
        const changed = patched(outcomes[place] as Outcome, without(command.patch, ['id']), outcomeSchema)
        return changed.ok ? ok(changed.value === outcomes[place] ? outcomes : outcomes.with(place, changed.value)) : changed
      })
    case 'remove-outcome':
      return removeOutcome(chart, command.nodeId, command.outcomeId)
    case 'move-outcome':
      return editOutcome(chart, command.nodeId, command.outcomeId, (outcomes, place) => ok(moved(outcomes, place, command.to)))
    case 'move-nodes':
      return move(chart, command.nodeIds, command.by)
    case 'place-nodes':
      return place(chart, command.positions)
    case 'add-entry':
      return editEntries(chart, command.list, (entries) => {
        const added = checked(entrySchema(command.list), command.entry)
        if (!added.ok) return added
        return entries.some((entry) => entry.id === added.value.id) ? idTaken(added.value.id) : ok([...entries, added.value])
      })
    case 'set-entry':
      return editEntry(chart, command.list, command.id, (entries, at) => {
        const changed = patched(entries[at] as Entry, without(command.patch, ['id']), entrySchema(command.list))
        return changed.ok ? ok(changed.value === entries[at] ? entries : entries.with(at, changed.value)) : changed
      })
    case 'remove-entry':
      return editEntry(chart, command.list, command.id, (entries, at) => ok(entries.toSpliced(at, 1)))
    default:
      return assertNever(command)
  }
}

// The chart itself

const chartFields = ['title', 'searchWords', 'basis', 'appliesTo', 'contributing', 'safetyParts', 'source'] as const satisfies readonly ChartField[]
const chartFieldsSchema = chartDocumentSchema.pick({
  title: true,
  searchWords: true,
  basis: true,
  appliesTo: true,
  contributing: true,
  safetyParts: true,
  source: true,
})

function setChart(chart: ChartDocument, patch: object): Edited {
  const others = Object.keys(chart).filter((field) => !chartFields.some((own) => own === field))
  const before = without(chart, others)
  const after = patched(before, only(patch, chartFields), chartFieldsSchema)
  if (!after.ok) return after
  return ok(after.value === before ? chart : { ...without(chart, chartFields), ...after.value })
}

// Lists that nodes name

type Entry = EntryLists[EntryList]

function entrySchema(list: EntryList): ZodType<Entry> {
  const schemas = { causes: causeSchema, serviceItems: serviceItemSchema, specKeys: specKeySchema, cautions: cautionSchema, access: accessSchema }
  return schemas[list]
}

function editEntries(chart: ChartDocument, list: EntryList, change: (entries: readonly Entry[]) => Edited<readonly Entry[]>): Edited {
  const isTop = list === 'cautions' || list === 'access'
  const entries: readonly Entry[] = (isTop ? chart[list] : chart.library[list]) ?? []
  const changed = change(entries)
  if (!changed.ok) return changed
  if (changed.value === entries) return ok(chart)
  return ok(isTop ? { ...chart, [list]: changed.value } : { ...chart, library: { ...chart.library, [list]: changed.value } })
}

function editEntry(chart: ChartDocument, list: EntryList, id: string, change: (entries: readonly Entry[], at: number) => Edited<readonly Entry[]>): Edited {
  return editEntries(chart, list, (entries) => {
    const at = entries.findIndex((entry) => entry.id === id)
    return at === -1 ? refuse('no-such-entry', `There is no ${id} among the ${entryWords[list]} of this chart.`) : change(entries, at)
  })
}

const entryWords: Readonly<Record<EntryList, string>> = {
  causes: 'causes',
  serviceItems: 'service items',
  specKeys: 'spec keys',
  cautions: 'cautions',
  access: 'accesses',
}
