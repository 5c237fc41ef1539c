import { isDecision } from '#shared/chart/graph.ts'
import { specLimitsFor } from '#shared/chart/spec-limits.ts'
import {
  chartIdSchema,
  deviceIdSchema,
  eventIdSchema,
  nodeIdSchema,
  outcomeIdSchema,
  personIdSchema,
  walkIdSchema,
  type CauseId,
  type OutcomeId,
  type Place,
} from '#shared/lib/ids.ts'
import { handBackRun } from '#shared/trade/hand-back-run.ts'
import type { SpecLimit } from '#shared/units/limits.ts'
import type { Unit } from '#shared/units/quantities.ts'
import type { EventOf, Machine, WalkEvent, WalkEventType } from '#shared/walk/events.ts'
import { heldAgainst, judgeTries, type Judging } from '#shared/walk/judging.ts'
import type { BeforePage, OutcomeChoice } from '#shared/walk/page.ts'
import { anyVersionOf, locate } from '#shared/walk/pinned-charts.ts'
import { appendEvent, replay } from '#shared/walk/replay.ts'
import { toPage } from '#shared/walk/select.ts'
import { newWalk, type StartedWalk, type WalkState } from '#shared/walk/state.ts'
import { demoCharts, demoSheets } from '#tests/content/demo-charts.ts'

/** The demo's charts, each standing for any version. */
export const charts = anyVersionOf(demoCharts)

export const saw: Machine = { class: 'chain-saw', engine: 'two-stroke' }
export const trimmer: Machine = { class: 'line-trimmer', engine: 'two-stroke' }
export const blower: Machine = { class: 'leaf-blower', engine: 'two-stroke' }
export const fourStrokeTrimmer: Machine = { class: 'line-trimmer', engine: 'four-stroke' }
export const mower: Machine = { class: 'mower', engine: 'four-stroke' }
export const pump: Machine = { class: 'water-pump', engine: 'four-stroke' }

const uuid = (number: number) => `00000000-0000-7000-8000-${number.toString().padStart(12, '0')}`
const walkId = walkIdSchema.parse(uuid(1))
const deviceId = deviceIdSchema.parse(uuid(2))
const personId = personIdSchema.parse(uuid(3))
const beginning = Date.UTC(2026, 2, 2, 9)

/** A technician at the bench, page after page as the player shows them. A refusal of the guard fails the test. */
export type Bench = ReturnType<typeof benchAt>

/**
 * A walk of a demo chart on a machine; the machine's spec sheet counts where the demo has one. Taps: a value counts as one with its
 * Record; an outcome, a caution page, a step's page and the proof of a cause count one each, no answer counts two.
 */
export function benchAt(chartId: string, machine: Machine, startId = 's') {
  let state: WalkState = newWalk
  let taps = 0
  const log: WalkEvent[] = []
  const cautionPages: { readonly node: Place; readonly ids: readonly string[] }[] = []

  function send<Type extends WalkEventType>(type: Type, payload: EventOf<Type>['payload']): void {
    const seq = log.length + 1
    const at = new Date(beginning + seq * 1000).toISOString()
    // Type and payload belong together by the signature; the compiler cannot tell which of the union they make.
    const event = { id: eventIdSchema.parse(uuid(1000 + seq)), walkId, seq, at, deviceId, personId, type, payload } as unknown as WalkEvent
    const appended = appendEvent(charts, state, event)
    if (!appended.ok) throw new Error(`${type} at ${state.phase === 'new' ? 'the start' : state.node}: ${appended.error.code} ${JSON.stringify(payload)}`)
    log.push(event)
    state = appended.value
  }

  function walk(): StartedWalk {
    if (state.phase === 'new') throw new Error('the walk has not begun')
    return state
  }

  /** Reads the cautions that wait, if any, and gives the page behind them. */
  function pageBehindCautions() {
    const page = toPage(charts, state)
    if (page.kind !== 'caution') return page
    cautionPages.push({ node: page.guards.place, ids: page.cautionIds })
    send('caution-acknowledged', { node: page.guards.place, cautionIds: [...page.cautionIds] })
    taps += 1
    return toPage(charts, state)
  }

  /** The node whose page is shown. */
  function here(): Place {
    const page = toPage(charts, state)
    if (page.kind === 'caution') return page.guards.place
    if (page.kind === 'before') return page.proof.node.place
    return 'node' in page ? page.node.place : walk().node
  }

  function expectAt(id: string): void {
    if (!here().endsWith(`/${id}`)) throw new Error(`expected ${id}, but the walk is at ${here()} (${walk().phase})`)
  }

  const bench = {
    get walk() {
      return walk()
    },
    get state() {
      return state
    },
    get taps() {
      return taps
    },
    /** The node whose page is shown, with its chart. */
    get place() {
      return here()
    },
    get node() {
      return here().slice(here().indexOf('/') + 1)
    },
    log,
    cautionPages,

    /** The page that the player shows. */
    page: () => toPage(charts, state),
    /** The log, read back from the beginning. */
    replayed: () => replay(charts, log),

    /** Does a step that has a page of its own. */
    step(id: string) {
      expectAt(id)
      const page = pageBehindCautions()
      if (page.kind !== 'step') throw new Error(`${id} is no step on a page of its own`)
      send('step-done', { node: page.node.place, seconds: 30 })
      taps += 1
      return bench
    },

    /** Answers a check, reading or proof; a measured one with the given values, else with values of its band. */
    answer(id: string, outcome: string, given?: readonly number[]) {
      expectAt(id)
      const shown = pageBehindCautions()
      const page = shown.kind === 'before' ? shown.proof : shown
      if (page.kind !== 'check' && page.kind !== 'reading' && page.kind !== 'proof') throw new Error(`${id} takes no answer`)
      for (const line of page.lines) send('step-done', { node: line.place, seconds: 0 })
      const before = shown.kind === 'before' ? { before: beforeOf(shown) } : {}
      const asked = page.kind === 'check' ? null : page.judging
      const judging = before.before === undefined ? asked : heldAgainst(asked, before.before)
      const values = given ?? valuesFor(page, judging, outcome)
      const note = page.kind === 'proof' && page.needsNote ? { note: 'Looked again under the lamp' } : {}
      send('finding-recorded', {
        node: page.node.place,
        outcome: outcomeIdSchema.parse(outcome),
        ...measured(judging, values),
        ...before,
        ...note,
        photoIds: [],
        seconds: 20,
      })
      taps += Math.max(1, values.length) + (shown.kind === 'before' ? 1 : 0)
      return bench
    },

    /** Leaves the check unanswered. */
    skip(id: string, why: 'not-sure' | 'cannot' | 'not-reproduced' = 'cannot') {
      expectAt(id)
      send('check-skipped', { node: here(), why })
      taps += 2
      return bench
    },

    /** Confirms the cause to which the walk has come, by its proof; where it had none, by a second look. */
    prove(causeId: string) {
      const page = toPage(charts, state)
      if (page.kind !== 'cause' || page.cause.causeId !== causeId) throw new Error(`not at ${causeId}, but at ${here()}`)
      send('cause-proven', {
        causeId: causeId as CauseId,
        ...(page.proofEventId === null ? { sight: { photoIds: [], note: 'Seen plainly' } } : { proofEventId: page.proofEventId }),
      })
      taps += 1
      return bench
    },

    /** From the proven cause to the closed walk: what led to it, the fix with the service list, the run with every item in order. */
    repairAndClose(contributing: readonly string[], minutes: number) {
      send('contributing-set', { causeIds: contributing as CauseId[] })
      send('repair-done', { serviceDone: [...walk().serviceList], partsUsed: [], minutes })
      const items = handBackRun(machine.class).map(({ id, reading }) => {
        const limits = reading === undefined ? undefined : walk().limits[reading.specKey]
        return { id, result: 'ok' as const, ...(reading === undefined || limits === undefined ? {} : { value: insideOf(limits), unit: reading.unit }) }
      })
      send('run-passed', { items })
      send('closed', { result: 'repaired' })
      return bench
    },
  }

  const sheet = demoSheets.find((entry) => entry.class === machine.class && entry.engine === machine.engine)
  send('started', {
    kind: 'bench',
    chartId: chartIdSchema.parse(chartId),
    startId: nodeIdSchema.parse(startId),
    pins: Object.fromEntries(demoCharts.map(({ id }) => [id, 1])),
    machine,
    limits: specLimitsFor(demoCharts, machine, sheet?.limits ?? null),
  })
  return bench
}

/** Value, unit and judge of an answer, as a finding tells them. */
function measured(judging: Judging | null, values: readonly number[]) {
  const value = values.at(-1)
  if (judging === null || value === undefined) return { judgedBy: 'hand' as const }
  const unit = unitOf(judging)
  const judgedBy = judgeTries(judging, values, unit).kind === 'outcome' ? ('limits' as const) : ('hand' as const)
  return { value, unit, ...(values.length > 1 ? { values: [...values] } : {}), judgedBy }
}

function unitOf({ limits, reading }: Judging): Unit {
  return limits !== null && 'unit' in limits ? limits.unit : reading.unit
}

/** What a proof compares with, taken ahead of its change: as it is while the trouble is there. */
function beforeOf({ outcomes, judging, proof, node }: BeforePage): { outcome: OutcomeId; value?: number; unit?: Unit } {
  const located = locate(charts, Object.fromEntries(demoCharts.map(({ id }) => [id, 1])), proof.node.place)?.node
  const good = located?.kind === 'proof' ? (located.compares?.confirmsWhen ?? []) : []
  const outcome = outcomes.find((choice) => !good.includes(choice.outcome))
  if (outcome === undefined) throw new Error(`${node.place} has only good outcomes`)
  const value = valuesFor({ outcomes }, judging, outcome.outcome).at(-1)
  return { outcome: outcome.outcome, ...(judging === null || value === undefined ? {} : { value, unit: unitOf(judging) }) }
}

/** A value inside limits. */
function insideOf(limits: SpecLimit): number {
  if ('as' in limits) throw new Error('no reading of the demo has limits as printed')
  return limits.min !== undefined && limits.max !== undefined ? (limits.min + limits.max) / 2 : (limits.min ?? limits.max ?? 0)
}

/** Values that lead to an outcome of a reading, or of the proof that compares with one; none where no value does. */
function valuesFor({ outcomes }: { readonly outcomes: readonly OutcomeChoice[] }, judging: Judging | null, outcome: string): readonly number[] {
  if (judging === null) return []
  const times = (value: number) => Array.from({ length: judging.repeat?.equal ?? 1 }, () => value)
  const { limits } = judging
  // Where nobody knows the limits the value is only written down, and the person picks.
  if (limits === null || 'as' in limits)
    return judging.proof !== null || outcomes.some((choice) => choice.outcome === outcome && choice.isBanded) ? times(1) : []
  const candidates = [limits.min === undefined ? [] : [limits.min * 0.8], [insideOf(limits)], limits.max === undefined ? [] : [limits.max * 1.2]].flat()
  const fitting = candidates.find((value) => {
    const verdict = judgeTries(judging, times(value), limits.unit)
    // Where the value proves nothing it is taken all the same, and the person picks.
    return verdict.kind === 'was-so-before' || (verdict.kind === 'outcome' && verdict.outcome === outcome)
  })
  return fitting === undefined ? [] : times(fitting)
}

/** The answers that the page shown, or the page behind its cautions, takes; `null` where it takes none. */
export function answersOf(bench: Bench): readonly string[] | null {
  const page = bench.page()
  const place =
    page.kind === 'caution' ? page.guards.place : page.kind === 'before' ? page.proof.node.place : 'node' in page ? page.node.place : bench.walk.node
  const node = locate(charts, bench.walk.pins, place)?.node
  return node !== undefined && isDecision(node) ? node.outcomes.map(({ id }) => id) : null
}

/** Whether the walk takes no further answer: it has come to a cause, to the lead, on hold or to a jump that lets the person pick. */
export function isAtEnd(bench: Bench): boolean {
  return !['caution', 'check', 'reading', 'before', 'proof', 'step'].includes(bench.page().kind)
}

/** How a walk ended: a cause by its id, an escalation by its reason, else the kind of its page. */
export function endOf(bench: Bench): string {
  const page = bench.page()
  if (page.kind === 'cause') return page.cause.causeId ?? 'unnamed'
  return page.kind === 'ask' || page.kind === 'escalated' ? page.reason : page.kind
}

/** What is found that is not as it should be, by node: an outcome. Nodes of other charts than the one in hand are told with their chart. */
export type Found = Readonly<Record<string, string>>

/**
 * Walks on to the end: what was found as given, everything else as it should be; the trouble shows, and proofs confirm. Fails where a given
 * node was never asked.
 */
export function walkOn(bench: Bench, found: Found): Bench {
  const unused = new Set(Object.keys(found))
  const inHand = bench.place.slice(0, bench.place.indexOf('/'))
  while (!isAtEnd(bench)) {
    if (answersOf(bench) === null) bench.step(bench.node)
    else {
      const name = [bench.place, ...(bench.place.startsWith(`${inHand}/`) ? [bench.node] : [])].find((key) => key in found) ?? ''
      unused.delete(name)
      bench.answer(bench.node, found[name] ?? expectedAt(bench))
    }
  }
  if (unused.size > 0) throw new Error(`never asked: ${[...unused].join(', ')}; it ended at ${bench.place}`)
  return bench
}

/** The nodes that a walk recorded, in order. */
export function placesOf(bench: Bench): readonly string[] {
  return bench.walk.trail.map((line) => line.position.node)
}

function expectedAt(bench: Bench): string {
  const node = locate(charts, bench.walk.pins, bench.place)?.node
  if (node === undefined || !isDecision(node)) throw new Error(`${bench.place} takes no answer`)
  const outcome =
    node.outcomes.find(({ reproduced, confirms }) => reproduced === true || confirms === true) ?? node.outcomes.find(({ normal }) => normal === true)
  return (outcome ?? raise(`good outcome at ${bench.place}`)).id
}

function raise(what: string): never {
  throw new Error(`no ${what}`)
}
