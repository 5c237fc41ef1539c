import { dirname, join } from 'node:path'

import type { ChartDocument } from '#shared/chart/document.ts'
import type { ChartId } from '#shared/lib/ids.ts'
import { walkEventSchema, type WalkEvent } from '#shared/walk/events.ts'
import { anyVersionOf, type PinnedCharts } from '#shared/walk/pinned-charts.ts'
import { appendEvent } from '#shared/walk/replay.ts'
import { newWalk, type WalkState } from '#shared/walk/state.ts'
import { readChartsOfFile } from './chart-files.ts'
import { BadInput, type Io, type VerbTable } from './verb.ts'

/**
 * `walk replay CHART EVENTS`: judges every event as the bench would and prints the state that they come to. CHART stands for whatever version the
 * events name; jumps, and symptoms that were picked, resolve among the files beside it. One of the two may be `-`, standard input.
 */
export const walkVerbs: VerbTable = {
  replay: {
    usage: 'CHART EVENTS',
    does: 'the state that the events of a walk come to; a refused event is named',
    run: async (args, io) => {
      const [chartFile, eventsFile, ...more] = args
      if (chartFile === undefined || eventsFile === undefined || more.length > 0)
        throw new BadInput('"walk replay" takes a CHART and a file of EVENTS; "-" reads standard input.')
      if (chartFile === '-' && eventsFile === '-') throw new BadInput('Only one of CHART and EVENTS can come from standard input.')
      const events = parseEvents(eventsFile === '-' ? 'Standard input' : eventsFile, await io.read(eventsFile))
      return { json: judgeAll(await readCharts(chartFile, events, io), events) }
    },
  },
}

/** The charts in reach of the file, and those beside it that only a picked symptom leads to. */
async function readCharts(file: string, events: readonly WalkEvent[], io: Io): Promise<PinnedCharts> {
  const { charts } = await readChartsOfFile(file, io)
  const documents = new Map<ChartId, ChartDocument>([...charts].map(([id, { chart }]) => [id, chart]))
  const picked = events.flatMap((event) => (event.type === 'jumped' ? [event.payload.chartId] : []))
  for (const id of picked) {
    if (file === '-' || documents.has(id)) continue
    const beside = await readChartsOfFile(join(dirname(file), `${id}.json`), io).catch((error: unknown) => {
      if (error instanceof BadInput) return null
      throw error
    })
    for (const { id: found, chart } of beside?.charts.values() ?? []) if (!documents.has(found)) documents.set(found, chart)
  }
  return anyVersionOf(documents.values())
}

/** The events of a file: a list, or an object that holds one as `events`. */
function parseEvents(name: string, text: string): readonly WalkEvent[] {
  const list = eventList(name, text)
  return list.map((entry, index) => {
    const parsed = walkEventSchema.safeParse(entry)
    if (parsed.success) return parsed.data
    throw new BadInput(`${name}, events[${index}]${typeWords(entry)}: malformed${issueWords(parsed.error)}`)
  })
}

function eventList(name: string, text: string): readonly unknown[] {
  const json = parseJson(name, text)
  const list: unknown = typeof json === 'object' && json !== null && 'events' in json ? json.events : json
  if (Array.isArray(list)) return list
  throw new BadInput(`${name} holds no list of events: a JSON array, or an object with one as "events".`)
}

function parseJson(name: string, text: string): unknown {
  try {
    return JSON.parse(text)
  } catch (error) {
    throw new BadInput(`${name} is not JSON: ${error instanceof Error ? error.message : String(error)}`)
  }
}

function typeWords(entry: unknown): string {
  return typeof entry === 'object' && entry !== null && 'type' in entry && typeof entry.type === 'string' ? ` (${entry.type})` : ''
}

function issueWords({ issues: [issue] }: { readonly issues: readonly { readonly path: readonly PropertyKey[]; readonly message: string }[] }): string {
  return issue === undefined ? '' : ` at /${issue.path.map(String).join('/')}: ${issue.message}`
}

/** Judges the events one by one, without a person: what only a role allows is taken at its word. */
function judgeAll(charts: PinnedCharts, events: readonly WalkEvent[]): WalkState {
  let state: WalkState = newWalk
  for (const [index, event] of events.entries()) {
    const next = appendEvent(charts, state, event)
    if (!next.ok) {
      const { code, field, detail } = next.error
      throw new BadInput(`events[${index}] (${event.type}): ${code}${field === null ? '' : ` at ${field}`}: ${detail}`)
    }
    state = next.value
  }
  return state
}
