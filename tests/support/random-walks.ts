import fc from 'fast-check'

import type { ChartDocument } from '#shared/chart/document.ts'
import { engineKinds } from '#shared/trade/equipment.ts'
import type { EventOf, WalkEventType } from '#shared/walk/events.ts'
import { heldAgainst, wasSoBefore } from '#shared/walk/judging.ts'
import type { BeforePage, ProofPage } from '#shared/walk/page.ts'
import { isOpen } from '#shared/walk/state.ts'
import { backTo } from '#shared/walk/select.ts'
import { ask, back, buildChart, cause, check, hold, jump, proof, reading, start, step } from './chart-builder.ts'
import { act, asked, questionId, runFailed, runPassed, uuid, type Act, type Bench } from './walk-builder.ts'
import { acknowledge, answerAgain, answerBefore, answerPage, finishStep, proveCause, skipPage, type EventDraft, type PageAnswer } from './walk-drafts.ts'

type Json = Readonly<Record<string, unknown>>

const accessIds = ['a0', 'a1', 'a2', 'a3']
const cautionIds = ['c0', 'c1', 'c2']
const causeIds = ['cause-0', 'cause-1']
const serviceIds = ['item-0', 'item-1']

/** Up to two of a list, in any order. */
const some = (ids: readonly string[]) => fc.uniqueArray(fc.constantFrom(...ids), { maxLength: 2 })
const maybe = <T>(key: string, value: fc.Arbitrary<T>): fc.Arbitrary<Json> =>
  fc.oneof({ weight: 3, arbitrary: fc.constant({}) }, { weight: 1, arbitrary: value.map((of) => ({ [key]: of })) })
const merged = (...parts: fc.Arbitrary<Json>[]): fc.Arbitrary<Json> => fc.tuple(...parts).map((all) => Object.assign({}, ...all) as Json)

/** What any node may ask of the machine. */
const demands = merged(
  maybe('needs', some(accessIds)),
  maybe('needsOneOf', fc.tuple(some(accessIds), some(accessIds))),
  maybe('closed', some(accessIds)),
  maybe('cautions', some(cautionIds)),
  maybe('machine', fc.constantFrom('running', 'stopped')),
  maybe('defeats', fc.constant(['screen'])),
  maybe('restores', fc.constant(['screen'])),
  maybe('onlyFor', fc.constantFrom({ engines: ['two-stroke'] }, { engines: ['four-stroke'] })),
)

const accessArb = fc.tuple(
  ...accessIds.map((id, index) =>
    merged(
      fc.record({ minutes: fc.constantFrom(0, 0.5, 1, 3), closeMinutes: fc.constantFrom(0, 0.1, 2), waitMinutes: fc.constantFrom(0, 10) }),
      maybe(
        'needs',
        some(accessIds.slice(0, Math.max(1, index))).map((needs) => needs.filter((need) => need !== id)),
      ),
      maybe(
        'excludes',
        some(accessIds).map((all) => all.filter((other) => other !== id)),
      ),
      maybe('cautions', some(cautionIds)),
    ).map((more) => ({ id, title: id, ...more })),
  ),
)

const cautionArb = fc.tuple(
  ...cautionIds.map((id) =>
    fc
      .record({ standing: fc.boolean(), again: some(['running', 'screen', ...accessIds]) })
      .map((more) => ({ id, word: 'WARNING', harm: 'serious-injury', hazard: id, avoid: id, ...more })),
  ),
)

const inner = 6
/** Ends of a chart that every node may lead to, beside the other nodes. */
const ends = ['e-ask', 'e-cause-0', 'e-cause-1', 'e-hold', 'e-call', 'e-away', 'e-missing', 'e-absent', 'e-pick', 'e-back']

function nodeArb(index: number): fc.Arbitrary<Json> {
  const id = `n${index}`
  const outcomes = fc.constantFrom<(string | Json)[]>(
    ['good', 'bad'],
    ['good', { id: 'dirty', title: 'Dirty', serviceable: true, serviceItem: 'item-0' }, 'bad'],
    ['one', 'two'],
  )
  return fc.oneof(
    {
      weight: 4,
      arbitrary: fc
        .tuple(demands, outcomes, fc.boolean(), maybe('checkId', fc.constantFrom('shared-check')))
        .map(([more, list, reproduces, shared]) =>
          check(id, list, { ...(reproduces && index < 2 ? { reproduces } : {}), ...(list.length === 2 && list[0] === 'good' ? shared : {}), ...more }),
        ),
    },
    {
      weight: 2,
      arbitrary: fc
        .tuple(demands, fc.boolean())
        .map(([more, repeats]) => reading(id, { ...(repeats ? { repeat: { equal: 2, within: 50, atMost: 3 } } : {}), ...more })),
    },
    { weight: 2, arbitrary: demands.map((more) => step(id, more)) },
    {
      weight: 2,
      arbitrary: fc
        .tuple(demands, fc.constantFrom(...causeIds), fc.constantFrom('isolation', 'put-right', 'sight'), fc.constantFrom('n0', 'n1', 'n2', null), fc.boolean())
        .map(([more, suspect, by, node, judges]) =>
          proof(id, suspect, { by, ...(node === null || node === id ? {} : { compares: { node, ...(judges ? { confirmsWhen: ['in'] } : {}) } }), ...more }),
        ),
    },
  )
}

/** A chart with loops, jumps of every kind, access, cautions, safety parts, nodes for other machines. */
function chartArb(id: string, other: string): fc.Arbitrary<ChartDocument> {
  // Nodes stand in the list four times, so that walks stay long before they come to an end.
  const nodeIds = Array.from({ length: inner }, (_, index) => `n${index}`)
  const targets = [...nodeIds, ...nodeIds, ...nodeIds, ...nodeIds, ...ends]
  return fc
    .record({
      nodes: fc.tuple(...Array.from({ length: inner }, (_, index) => nodeArb(index))),
      access: accessArb,
      cautions: cautionArb,
      ways: fc.array(fc.nat(), { minLength: 40, maxLength: 40 }),
      unsafe: fc.boolean(),
    })
    .map(({ nodes, access, cautions, ways, unsafe }) => {
      let next = 0
      const target = () => targets[(ways[next++ % ways.length] ?? 0) % targets.length] ?? 'e-ask'
      const edges = nodes.flatMap((node) => {
        const outcomes = node['outcomes'] as readonly { id: string }[] | undefined
        return outcomes ? outcomes.map((outcome) => `${String(node['id'])}.${outcome.id} > ${target()}`) : [`${String(node['id'])} > ${target()}`]
      })
      return buildChart({
        id,
        access,
        cautions,
        causes: causeIds.map((causeId, index) => ({ id: causeId, title: causeId, system: 'fuel', unsafe: unsafe && index === 0, contributing: index === 1 })),
        serviceItems: serviceIds.map((item) => ({ id: item, title: item })),
        nodes: [
          start(),
          ...nodes,
          ask('e-ask'),
          cause('e-cause-0', 'cause-0'),
          cause('e-cause-1', 'cause-1'),
          hold('e-hold', { causeId: 'cause-0' }),
          jump('e-call', other, { returns: true }),
          jump('e-away', other, { at: 'n1' }),
          jump('e-missing', 'nobody-wrote-it'),
          jump('e-absent', 'nobody-wrote-it', { returns: true }),
          { id: 'e-pick', kind: 'jump', pick: 'symptom' },
          back('e-back'),
        ],
        edges: ['s > n0', ...edges, `e-call > ${target()}`, `e-absent > ${target()}`],
      })
    })
}

/** Two charts that jump into each other. */
export const chartsArb: fc.Arbitrary<[ChartDocument, ChartDocument]> = fc.tuple(chartArb('main', 'sub'), chartArb('sub', 'main'))

/** The choices of a random walk: at each page one number picks what is done. */
export const choicesArb = fc.array(fc.nat({ max: 10_000 }), { maxLength: 40 })

export const machineArb = fc.constantFrom(...engineKinds).map((engine) => ({ class: 'chain-saw' as const, engine }))

/** Every way in which the page can be taken up; each is a batch that the guard has to accept. */
export function waysOfPage({ page, state, charts }: Bench): readonly (readonly EventDraft[])[] {
  switch (page.kind) {
    case 'caution':
      return [[acknowledge(page)]]
    case 'step':
      return [[finishStep(page, 3)]]
    case 'check':
      return [
        ...page.outcomes.map(({ outcome }) => answerPage(page, { outcome, seconds: 1 })),
        ...(page.offered ? [answerAgain(page, page.offered, 1)] : []),
        [skipPage(page, 'not-sure')],
        [skipPage(page, 'not-reproduced')],
      ].flatMap((way) => (way ? [way] : []))
    case 'reading':
      return [
        [9000, 9010],
        [12_000, 12_010],
      ]
        .map((values) => answerPage(page, { values: page.judging.repeat ? values : values.slice(1), unit: '1/min', seconds: 1 }))
        .flatMap((way) => (way ? [way] : []))
        .concat(page.offered ? [answerAgain(page, page.offered, 1)] : [], [[skipPage(page, 'cannot')]])
    case 'before':
    case 'proof': {
      const asking = page.kind === 'before' ? page.proof : page
      const measured = takenBefore(page).flatMap((taken) => proofWays(asking, taken))
      return [...measured, ...(asking.offered ? [answerAgain(asking, asking.offered, 1)] : []), [skipPage(page, 'not-sure')]].flatMap((way) =>
        way ? [way] : [],
      )
    }
    case 'pick':
      return page.starts.map(({ chartId, version, startId }) => [{ type: 'jumped', payload: { chartId, version, startId, pins: {} } }])
    case 'ask':
      return [[{ type: 'escalated', payload: { reason: page.reason } }]]
    case 'hold':
      return [[{ type: 'held', payload: { tagNo: '1', why: 'Unsafe' } }]]
    case 'cause': {
      const way = proveCause(page, { note: 'Seen', photoIds: [] })
      const not: EventDraft = { type: 'cause-not-proven', payload: { causeId: page.cause.causeId as never, sight: { note: 'Sound', photoIds: [] } } }
      return [...(way ? [[way]] : []), [not]]
    }
    case 'proven':
      return [
        [{ type: 'repair-done', payload: { serviceDone: [], partsUsed: [], minutes: 1 } }],
        ...(page.canCloseUnrepaired ? [[{ type: 'closed', payload: { result: 'not-repaired' } } as EventDraft]] : []),
      ]
    case 'run':
      return [runPassed, runFailed].map((run) => run({ page, state, charts } as Bench))
    case 'run-passed':
    case 'escalated':
    case 'held':
      return page.results.map((result) => [{ type: 'closed', payload: { result } }])
    case 'paused':
      return [[{ type: 'resumed', payload: {} }]]
    default:
      return []
  }
}

type Taken = NonNullable<ReturnType<typeof answerBefore>> | undefined

/** What a proof may take before its change: a value below and one within the limits, or the first outcome of a look. */
function takenBefore(page: BeforePage | ProofPage): readonly Taken[] {
  if (page.kind === 'proof') return [undefined]
  const answers: readonly PageAnswer[] = page.judging
    ? [[9000], [12_000]].map((values) => ({ values, unit: '1/min', seconds: 0 }))
    : page.outcomes.slice(0, 1).map(({ outcome }) => ({ outcome, seconds: 0 }))
  return answers.map((answer) => answerBefore(page, answer) ?? undefined)
}

/** The ways to answer a proof: by a value that the limits judge, by hand beside a value that proves nothing, by sight. */
function proofWays(page: ProofPage, taken: Taken): readonly (readonly EventDraft[] | null)[] {
  const judging = taken === undefined ? page.judging : heldAgainst(page.judging, taken)
  const seen = { note: 'Seen', seconds: 1 }
  if (judging === null) return page.outcomes.map(({ outcome }) => answerPage(page, { outcome, ...seen }, taken))
  const measured = [[9000], [12_000]].map((values): PageAnswer => ({ values, unit: '1/min', ...seen }))
  return wasSoBefore(judging)
    ? measured.flatMap((answer) => page.outcomes.map(({ outcome }) => answerPage(page, { ...answer, outcome }, taken)))
    : measured.map((answer) => answerPage(page, answer, taken))
}

/** Acts beside the page: some fit, some do not; the guard tells. */
export const asides: readonly Act[] = [
  (bench) => {
    const to = isOpen(bench.state) ? backTo(bench.charts, bench.state) : null
    return to === null ? [] : [{ type: 'stepped-back', payload: { toEventId: to } }]
  },
  act('paused', {}),
  act('note-added', { text: 'A note', photoIds: [] }),
  asked,
  act('suspect-named', { causeId: 'cause-0' as never }),
  act('access-changed', { opened: ['a0' as never], closed: [] }),
  act('access-changed', { opened: [], closed: ['a0' as never, 'a1' as never] }),
  act('noticed', { node: 'main/n3' as never, outcome: 'good' as never, photoIds: [] }),
  act('contributing-set', { causeIds: ['cause-1' as never] }),
  act('service-changed', { added: ['item-1' as never], dropped: [] }),
  act('machine-identified', { machine: { class: 'chain-saw', engine: 'four-stroke' }, limits: {} }),
  act('escalated', { reason: 'Odd' }),
]

/** One choice of a random walk; true when something was taken. */
export function choose(bench: Bench, choice: number): boolean {
  const ways = waysOfPage(bench)
  const aside = choice % 5 === 0 ? asides[Math.floor(choice / 5) % asides.length] : undefined
  const drafts = aside ? aside(bench) : (ways[choice % Math.max(1, ways.length)] ?? [])
  const before = bench.log.length
  for (const draft of drafts) if (!bench.send(draft)) break
  if (aside) bench.refusal = null
  return bench.log.length > before
}

const places = ['main/n0', 'main/n1', 'main/n2', 'main/n3', 'main/s', 'main/e-pick', 'sub/n1', 'nowhere/n1']
const place = fc.constantFrom(...places)
const outcome = fc.constantFrom('good', 'bad', 'one', 'low', 'in', 'gone', 'still', 'nonsense')
const eventId = fc.integer({ min: 1000, max: 1020 }).map(uuid)
const accessList = some([...accessIds, 'nobody-knows-it'])
const optional = <T>(key: string, value: fc.Arbitrary<T>) => maybe(key, value)
const value = merged(optional('value', fc.constantFrom(0, 9000, 12_000)), optional('unit', fc.constantFrom('1/min', 'psi')))
const sight = optional('sight', fc.constant({ note: 'x', photoIds: [] }))

/** Payloads of the right form and of any content. */
const payloads: { readonly [Type in WalkEventType]: fc.Arbitrary<Json> } = {
  started: fc.constant({
    kind: 'bench',
    chartId: 'main',
    startId: 's',
    pins: { main: 1, sub: 1 },
    machine: { class: 'chain-saw', engine: 'two-stroke' },
    limits: {},
  }),
  'machine-identified': machineArb.map((machine) => ({ machine, limits: {} })),
  'caution-acknowledged': fc.record({ node: place, cautionIds: fc.uniqueArray(fc.constantFrom(...cautionIds), { minLength: 1 }) }),
  'step-done': fc.record({ node: place, seconds: fc.nat({ max: 100 }) }),
  'finding-recorded': merged(
    fc.record({ node: place, outcome, judgedBy: fc.constantFrom('limits', 'hand'), photoIds: fc.constant([]), seconds: fc.nat({ max: 100 }) }),
    value,
    optional('reuses', eventId),
    optional('before', fc.record({ outcome })),
  ),
  'check-skipped': fc.record({ node: place, why: fc.constantFrom('not-sure', 'cannot', 'not-reproduced') }),
  noticed: merged(fc.record({ node: place, photoIds: fc.constant([]) }), value, optional('outcome', outcome)),
  'access-changed': fc.record({ opened: accessList, closed: accessList }),
  'stepped-back': eventId.map((toEventId) => ({ toEventId })),
  jumped: fc.record({
    chartId: fc.constantFrom('main', 'sub', 'nobody-wrote-it'),
    version: fc.constantFrom(1, 2),
    startId: fc.constantFrom('s', 'n0'),
    pins: fc.constantFrom({}, { sub: 1 }),
  }),
  'suspect-named': fc.constantFrom(...causeIds).map((causeId) => ({ causeId })),
  'cause-proven': merged(fc.record({ causeId: fc.constantFrom(...causeIds) }), optional('proofEventId', eventId), sight),
  'cause-not-proven': merged(fc.record({ causeId: fc.constantFrom(...causeIds) }), optional('proofEventId', eventId), sight),
  'contributing-set': fc.constantFrom(...causeIds).map((causeId) => ({ causeIds: [causeId] })),
  'service-changed': fc.record({ added: some(serviceIds), dropped: some(serviceIds) }),
  asked: fc.constant({ questionId, text: 'Why?', photoIds: [] }),
  answered: merged(fc.constant({ questionId, text: 'So', photoIds: [] }), optional('goTo', place)),
  escalated: fc.constant({ reason: 'Odd' }),
  held: fc.constant({ tagNo: '1', why: 'Unsafe' }),
  paused: fc.constant({}),
  resumed: fc.constant({}),
  'handed-over': fc.constant({ to: uuid(12) }),
  'taken-over': fc.constant({ from: uuid(11), why: 'Mine' }),
  'repair-done': fc.record({ serviceDone: some(serviceIds), partsUsed: fc.constant([]), minutes: fc.nat({ max: 100 }) }),
  ticked: fc.record({ list: fc.constantFrom('fix', 'service', 'run'), id: fc.constantFrom('remedy', 'item-0', 'full-speed'), on: fc.boolean() }),
  'run-passed': fc.constant({ items: [] }),
  'run-failed': fc.constant({ items: [{ id: 'full-speed', result: 'failed' }] }),
  'note-added': fc.constant({ text: 'x', photoIds: [] }),
  flagged: place.map((node) => ({ node, text: 'x', photoIds: [] })),
  'check-noted': fc.constant({ title: 'x', found: 'y', photoIds: [] }),
  'cause-noted': fc.constant({ title: 'x' }),
  closed: fc.constantFrom('repaired', 'no-cause-found', 'held').map((result) => ({ result })),
  abandoned: fc.constant({ why: 'x' }),
}

/** An event of the right form and of any content, whatever the walk is at; ends are rare, so that streams stay long. */
export const draftArb: fc.Arbitrary<EventDraft> = fc.oneof(
  ...(Object.keys(payloads) as WalkEventType[]).map((type) => ({
    weight: type === 'closed' || type === 'abandoned' || type === 'held' ? 1 : type === 'finding-recorded' ? 20 : 5,
    arbitrary: payloads[type].map((payload) => ({ type, payload }) as unknown as EventDraft),
  })),
)

/** The start of the random walks. */
export function begin(machine: EventOf<'started'>['payload']['machine']): EventDraft {
  return {
    type: 'started',
    payload: { kind: 'bench', chartId: 'main' as never, startId: 's' as never, pins: { main: 1, sub: 1 } as never, machine, limits: {} },
  }
}
