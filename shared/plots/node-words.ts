import { assertNever } from '#shared/lib/assert-never.ts'
import type { CauseId, ChartId, NodeId } from '#shared/lib/ids.ts'
import type { ChartNode, NodeOf } from '#shared/chart/document.ts'
import { isDecision, type ChartIndex } from '#shared/chart/graph.ts'
import { limitsOf, limitWords } from '#shared/chart/judge.ts'
import type { MachineKind } from '#shared/chart/spec-limits.ts'
import { systemWords } from '#shared/trade/systems.ts'
import { unitWords } from '#shared/units/format-value.ts'
import type { SpecLimits } from '#shared/units/limits.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'

/** What the words of a picture depend on beside the chart. */
export interface WordContext {
  readonly index: ChartIndex
  readonly numbers: ReadonlyMap<NodeId, string>
  readonly format: NumberFormat
  /** Limits of the machine whose walk is drawn; without them readings show the chart's own. */
  readonly specLimits: SpecLimits
  readonly machine: MachineKind | null
  /** Titles of other charts, for jumps; a chart without one is named by its id. */
  readonly chartTitles: ReadonlyMap<ChartId, string>
}

/** The words in and about a node. `note` stands in capitals under the title, `figure` in mono. */
export interface NodeWords {
  readonly number: string
  readonly title: string
  readonly note: string
  readonly figure: string
  readonly outcomes: readonly string[]
  /** The node in words: "Check 7: Does light come through the filter? 1 Light shows, 2 No light". */
  readonly label: string
}

const kindWords: Readonly<Record<ChartNode['kind'], string>> = {
  start: 'Start',
  step: 'Step',
  check: 'Check',
  reading: 'Reading',
  proof: 'Proof',
  cause: 'Cause',
  jump: 'Jump',
  escalate: 'Ask',
  hold: 'Hold',
  back: 'Back',
}

/** The words of a node; a node without a title gets one from what it stands for. */
export function nodeWords(context: WordContext, node: ChartNode): NodeWords {
  const number = context.numbers.get(node.id) ?? ''
  const title = titleOf(context, node)
  const note = noteOf(context, node)
  const figure = node.kind === 'reading' ? figureOf(context, node) : ''
  const outcomes = isDecision(node) ? node.outcomes.map((outcome) => outcome.title) : []
  const choices = outcomes.map((words, place) => `${place + 1} ${words}`).join(', ')
  const label = [`${kindWords[node.kind]}${number === '' ? '' : ` ${number}`}: ${title}`, note === '' || node.kind === 'start' ? '' : note, figure, choices].filter((part) => part !== '').join('. ')
  return { number, title, note, figure, outcomes, label }
}

function causeTitle({ index }: WordContext, causeId: CauseId): string {
  return index.causes.get(causeId)?.title ?? causeId
}

function titleOf(context: WordContext, node: ChartNode): string {
  const own = node.title?.trim() ?? ''
  if (own !== '') return own
  switch (node.kind) {
    case 'cause':
      return causeTitle(context, node.causeId)
    case 'hold':
      return node.causeId === undefined ? 'Not safe to hand back' : causeTitle(context, node.causeId)
    case 'jump':
      return node.pick === 'symptom' ? 'Pick another symptom' : targetOf(context, node)
    case 'escalate':
      return 'Ask the lead'
    case 'back':
      return 'Back where it was called'
    case 'start':
      return context.index.chart.title
    case 'step':
    case 'check':
    case 'reading':
    case 'proof':
      return node.do?.trim() ?? ''
    default:
      return assertNever(node)
  }
}

function targetOf({ chartTitles }: WordContext, node: NodeOf<'jump'>): string {
  return node.chart === undefined ? 'Another chart' : (chartTitles.get(node.chart) ?? node.chart.replaceAll(/[-_.]/g, ' '))
}

function noteOf(context: WordContext, node: ChartNode): string {
  switch (node.kind) {
    case 'start':
      return 'Start'
    case 'proof':
      return node.suspect === undefined ? 'Proof' : `Proof: ${causeTitle(context, node.suspect)}`
    case 'cause': {
      const system = context.index.causes.get(node.causeId)?.system
      return system === undefined ? 'Cause' : systemWords[system]
    }
    case 'jump': {
      const titled = (node.title?.trim() ?? '') !== ''
      const target = titled && node.pick === undefined ? targetOf(context, node) : ''
      if (node.returns === true) return target === '' ? 'Comes back' : `Comes back: ${target}`
      return target === '' ? (node.pick === undefined ? 'Other chart' : 'Pick') : target
    }
    case 'escalate':
      return 'Ask'
    case 'hold':
      return 'Hold: not safe to hand back'
    case 'back':
      return 'Back'
    case 'step':
    case 'check':
    case 'reading':
      return ''
    default:
      return assertNever(node)
  }
}

function figureOf({ index, specLimits, machine, format }: WordContext, node: NodeOf<'reading'>): string {
  const limits = limitsOf(node, specLimits, [...index.specKeys.values()], machine ?? undefined)
  const words = limits === null ? '' : limitWords(limits, node.unit, format)
  return words === '' ? unitWords[node.unit] : words
}
