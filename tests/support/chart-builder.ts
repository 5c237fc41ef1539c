import type { ChartDocument } from '#shared/chart/document.ts'
import { parseChart } from '#shared/chart/parse.ts'

type Json = Readonly<Record<string, unknown>>

/** What a chart under test consists of; what is left out does not matter to the test and is filled in. */
export type ChartSketch = {
  readonly id?: string
  readonly title?: string
  readonly basis?: 'own' | 'printed-table'
  readonly nodes: readonly Json[]
  /** Edges as "n1 > n2", or "n1.low > n2" from an outcome. */
  readonly edges: readonly string[]
  readonly causes?: readonly Json[]
  readonly serviceItems?: readonly Json[]
  readonly specKeys?: readonly Json[]
  readonly access?: readonly Json[]
  readonly cautions?: readonly Json[]
  /** Library entries, accesses and cautions that the nodes name and the sketch lacks are made up, unless this is false. */
  readonly fill?: boolean
  /** Further fields of the document. */
  readonly more?: Json
}

/** Builds a chart and sends it through the door, so that a test can never hold one that the product would refuse. */
export function buildChart(sketch: ChartSketch): ChartDocument {
  const parsed = parseChart(sketchJson(sketch))
  if (!parsed.ok) throw new Error(`The chart of this test is refused: ${parsed.error.errors.map((error) => `${error.pointer} ${error.detail}`).join('; ')}`)
  return parsed.value
}

/** The same chart as JSON, for tests of the door and of the command line. */
export function sketchJson(sketch: ChartSketch): Record<string, unknown> {
  const filled = sketch.fill === false ? [] : sketch.nodes
  return {
    format: 'pullcord-chart',
    formatVersion: 1,
    id: sketch.id ?? 'under-test',
    title: sketch.title ?? 'Chart under test',
    ...(sketch.basis === undefined ? {} : { basis: sketch.basis }),
    cautions: withMissing(
      sketch.cautions ?? [],
      [...filled, ...(sketch.fill === false ? [] : (sketch.access ?? []))].flatMap((node) => strings(node['cautions'])),
      cautionOf,
    ),
    access: withMissing(sketch.access ?? [], filled.flatMap(accessNamed), accessOf),
    library: {
      causes: withMissing(sketch.causes ?? [], filled.flatMap(causesNamed), causeOf),
      serviceItems: withMissing(sketch.serviceItems ?? [], filled.flatMap(itemsNamed), (id) => ({ id, title: `Item ${id}`, minutes: 2 })),
      specKeys: sketch.specKeys ?? [],
    },
    nodes: sketch.nodes,
    edges: sketch.edges.map(toEdge),
    ...sketch.more,
  }
}

/** "n1.low > n2" -> { from, outcome, to }. */
export function toEdge(text: string): Json {
  const [from = '', to = ''] = text.split('>').map((end) => end.trim())
  const [node, outcome] = from.split('.')
  return outcome === undefined ? { from: node, to } : { from: node, outcome, to }
}

/** A start. */
export const start = (id = 's', more: Json = {}): Json => ({ id, kind: 'start', title: `Start ${id}`, ...more })
/** A step. */
export const step = (id: string, more: Json = {}): Json => ({ id, kind: 'step', title: `Do ${id}`, minutes: 1, ...more })
/** A check; outcomes as ids ("good" ones are marked normal) or whole objects. Without any: good and bad. */
export const check = (id: string, outcomes: readonly (string | Json)[] = ['good', 'bad'], more: Json = {}): Json => ({
  id,
  kind: 'check',
  title: `Look at ${id}`,
  minutes: 1,
  outcomes: outcomes.map(toOutcome),
  ...more,
})
/** The check that reproduces: outcomes `yes` (reproduced) and `no`. */
export const reproducing = (id = 'n1', more: Json = {}): Json =>
  check(
    id,
    [
      { id: 'yes', title: 'It does it', reproduced: true },
      { id: 'no', title: 'Runs well' },
    ],
    { reproduces: true, ...more },
  )
/** A full-speed reading with one band: low under the lower limit, in from there up. */
export const reading = (id: string, more: Json = {}): Json => ({
  id,
  kind: 'reading',
  title: `Measure ${id}`,
  minutes: 1,
  quantity: 'rotational-speed',
  unit: '1/min',
  limits: { min: 11_000 },
  outcomes: [
    { id: 'low', title: 'Low' },
    { id: 'in', title: 'In limits', normal: true },
  ],
  bands: [
    { outcome: 'low', to: 'min' },
    { outcome: 'in', from: 'min', fromIncluded: true },
  ],
  ...more,
})
/** A proof of a suspect: outcomes `gone` (confirms) and `still`. */
export const proof = (id: string, suspect: string, more: Json = {}): Json => ({
  id,
  kind: 'proof',
  title: `Prove ${suspect}`,
  minutes: 2,
  suspect,
  by: 'isolation',
  outcomes: [
    { id: 'gone', title: 'Gone', confirms: true },
    { id: 'still', title: 'Still there' },
  ],
  ...more,
})
/** A cause node. */
export const cause = (id: string, causeId: string, more: Json = {}): Json => ({ id, kind: 'cause', causeId, ...more })
/** A jump that does not come back. */
export const jump = (id: string, chart: string, more: Json = {}): Json => ({ id, kind: 'jump', chart, ...more })
/** An escalation. */
export const ask = (id = 'ask', more: Json = {}): Json => ({ id, kind: 'escalate', title: 'Ask the lead', reason: 'no-cause-found', ...more })
/** A hold. */
export const hold = (id = 'hold', more: Json = {}): Json => ({ id, kind: 'hold', title: 'Not safe to hand back', ...more })
/** The way back to the caller. */
export const back = (id = 'back', more: Json = {}): Json => ({ id, kind: 'back', title: 'Back', ...more })

/**
 * The smallest chart that the chart check has nothing to say about: reproduce, one check, its proof, its cause; all good
 * and not reproduced end with the lead. Tests of one remark change one thing in it.
 */
export const soundSketch: ChartSketch = {
  id: 'sound',
  nodes: [start(), reproducing(), check('n2'), proof('p2', 'filter-packed'), cause('c2', 'filter-packed'), ask(), ask('a0', { reason: 'could-not-reproduce' })],
  edges: ['s > n1', 'n1.yes > n2', 'n1.no > a0', 'n2.good > ask', 'n2.bad > p2', 'p2.gone > c2', 'p2.still > ask'],
}

function toOutcome(outcome: string | Json): Json {
  if (typeof outcome !== 'string') return outcome
  return { id: outcome, title: outcome.charAt(0).toUpperCase() + outcome.slice(1), ...(outcome.startsWith('good') ? { normal: true } : {}) }
}

function withMissing(given: readonly Json[], named: readonly string[], make: (id: string) => Json): readonly Json[] {
  const known = new Set(given.map((entry) => entry['id']))
  return [...given, ...[...new Set(named)].filter((id) => !known.has(id)).map(make)]
}

const accessOf = (id: string): Json => ({ id, title: id, minutes: 1, closeMinutes: 1 })
const causeOf = (id: string): Json => ({ id, title: `Cause ${id}`, system: 'fuel', remedy: { text: 'Clean it', minutes: 5, parts: [] } })
const cautionOf = (id: string): Json => ({ id, word: 'CAUTION', harm: 'minor-injury', hazard: 'Hot muffler', consequence: 'Burns', avoid: 'Let it cool' })

function strings(value: unknown): readonly string[] {
  return Array.isArray(value) ? value.flatMap((entry: unknown) => (typeof entry === 'string' ? [entry] : strings(entry))) : []
}
function accessNamed(node: Json): readonly string[] {
  return [...strings(node['needs']), ...strings(node['needsOneOf'])]
}
function causesNamed(node: Json): readonly string[] {
  return [node['suspect'], node['causeId']].filter((id) => typeof id === 'string')
}
function itemsNamed(node: Json): readonly string[] {
  const outcomes: unknown = node['outcomes']
  return Array.isArray(outcomes) ? outcomes.flatMap((outcome: Json) => strings([outcome['serviceItem']])) : []
}
