import fc from 'fast-check'
import { expect, test } from 'vitest'
import type { ChartCommand } from '#shared/chart/commands.ts'
import { parseChart } from '#shared/chart/parse.ts'
import { applyToHistory, mostSteps, redo, startHistory, undo, type ChartHistory } from '#shared/chart/history.ts'
import { indexChart } from '#shared/chart/graph.ts'
import { lintChart } from '#shared/chart/lint/lint-chart.ts'
import { buildChart, cause, check, jump, proof, reading, soundSketch, step } from '#tests/support/chart-builder.ts'

const mostly = <T>(usual: fc.Arbitrary<T>, odd: fc.Arbitrary<T>) => fc.oneof({ arbitrary: usual, weight: 12 }, { arbitrary: odd, weight: 1 })
const nodeId = mostly(fc.constantFrom('s', 'n1', 'n2', 'p2', 'c2', 'ask', 'w1', 'n7'), fc.constantFrom('gone', '__proto__'))
const outcomeId = mostly(fc.constantFrom('good', 'bad', 'low', 'gone', 'still', 'new'), fc.constant('bad id'))
const maybeOutcome = fc.option(outcomeId, { nil: undefined })
const number = mostly(fc.integer({ min: 0, max: 60 }), fc.constantFrom(-5, NaN, Infinity, -Infinity, 1e308, 0.5))
const node = fc.oneof(
  nodeId.map((id) => step(id)),
  nodeId.map((id) => check(id)),
  nodeId.map((id) => reading(id)),
  fc.tuple(nodeId, nodeId).map(([id, suspect]) => proof(id, suspect)),
  nodeId.map((id) => cause(id, 'worn')),
  nodeId.map((id) => jump(id, 'elsewhere', { returns: true })),
  fc.record({ id: nodeId, kind: fc.constantFrom('check', 'riddle'), outcomes: fc.jsonValue() }),
)
const value = fc.oneof(fc.constant(null), fc.constant(undefined), number, fc.string(), fc.boolean(), fc.jsonValue())
const goodPatch = fc.oneof(
  fc.record({ title: fc.string() }),
  fc.record({ minutes: fc.option(number) }),
  fc.record({ needs: fc.array(nodeId, { maxLength: 2 }), ifSkipped: fc.option(outcomeId) }),
  fc.record({ onlyFor: fc.record({ otherwise: nodeId }) }),
)
const oddPatch = fc.dictionary(
  fc.constantFrom('title', 'do', 'minutes', 'needs', 'onlyFor', 'ifSkipped', 'rows', 'bands', 'id', 'kind', 'outcomes', 'word', 'system', '__proto__'),
  value,
)
const patch = mostly<object>(goodPatch, oddPatch)
const point = fc.record({ x: number, y: number })
const list = fc.constantFrom('causes', 'serviceItems', 'specKeys', 'cautions', 'access')
const entry = fc.oneof(
  fc.record({ id: nodeId, title: fc.string(), system: fc.constantFrom('fuel', 'air', 'nothing') }),
  fc.record({ id: nodeId, title: fc.string(), minutes: number }),
  fc.record({ id: nodeId, word: fc.constantFrom('DANGER', 'NOTICE'), harm: fc.constant('death'), hazard: fc.string(), avoid: fc.string() }),
)

/** Everything that an editor could send, and a good deal that it never should. */
const command = fc.oneof(
  fc.record({ type: fc.constant('set-chart'), patch: fc.dictionary(fc.constantFrom('title', 'searchWords', 'basis', 'id', 'nodes', 'format'), value) }),
  fc.record({
    type: fc.constant('add-nodes'),
    nodes: fc.array(node, { maxLength: 2 }),
    edges: fc.array(fc.record({ from: nodeId, outcome: maybeOutcome, to: nodeId }), { maxLength: 2 }),
  }),
  fc.record({ type: fc.constant('insert-node'), node, into: fc.record({ from: nodeId, outcome: maybeOutcome }), position: point }),
  fc.record({ type: fc.constant('remove-nodes'), nodeIds: fc.array(nodeId, { maxLength: 2 }), closeGap: fc.boolean() }),
  fc.record({ type: fc.constant('rename-node'), nodeId, title: fc.string() }),
  fc.record({ type: fc.constant('set-node'), nodeId, patch }),
  fc.record({ type: fc.constant('replace-node'), node }),
  fc.record({ type: fc.constant('connect'), from: nodeId, outcome: maybeOutcome, to: nodeId }),
  fc.record({ type: fc.constant('disconnect'), from: nodeId, outcome: maybeOutcome }),
  fc.record({ type: fc.constant('add-outcome'), nodeId, outcome: fc.record({ id: outcomeId, title: fc.string() }), at: number }),
  fc.record({ type: fc.constant('set-outcome'), nodeId, outcomeId, patch }),
  fc.record({ type: fc.constant('remove-outcome'), nodeId, outcomeId }),
  fc.record({ type: fc.constant('move-outcome'), nodeId, outcomeId, to: number }),
  fc.record({ type: fc.constant('move-nodes'), nodeIds: fc.array(nodeId, { maxLength: 2 }), by: point }),
  fc.record({ type: fc.constant('place-nodes'), positions: fc.dictionary(nodeId, point) }),
  fc.record({ type: fc.constant('add-entry'), list, entry }),
  fc.record({ type: fc.constant('set-entry'), list, id: nodeId, patch }),
  fc.record({ type: fc.constant('remove-entry'), list, id: nodeId }),
) as unknown as fc.Arbitrary<ChartCommand>

const edits = fc.array(fc.record({ command, gesture: fc.option(fc.constantFrom('drag', 'typing'), { nil: undefined }) }), { maxLength: 30, size: 'max' })
const first = buildChart(soundSketch)

function play(list: readonly { command: ChartCommand; gesture?: string | undefined }[], each: (history: ChartHistory) => void = () => undefined): ChartHistory {
  return list.reduce<ChartHistory>((history, { command: next, gesture }) => {
    const made = applyToHistory(history, next, gesture === undefined ? {} : { gesture })
    if (made.ok) each(made.value)
    return made.ok ? made.value : history
  }, startHistory(first))
}

test('editing never leaves a document that its own door refuses, stored and read again', () => {
  let made = 0
  fc.assert(
    fc.property(edits, (list) => {
      play(list, ({ present }) => {
        made += 1
        expect(parseChart(present)).toMatchObject({ ok: true })
        expect(parseChart(JSON.parse(JSON.stringify(present)))).toMatchObject({ ok: true })
      })
    }),
    { numRuns: 120 },
  )
  expect(made).toBeGreaterThan(120)
})

test('undo all the way is the first document, redo all the way the last', () => {
  fc.assert(
    fc.property(edits, (list) => {
      const last = play(list)
      const steps = Array.from({ length: mostSteps })
      const back = steps.reduce<ChartHistory>((history) => undo(history), last)
      expect(back.present).toBe(first)
      expect(steps.reduce<ChartHistory>((history) => redo(history), back).present).toBe(last.present)
    }),
  )
})

test('the chart check has an answer for every document that editing can make', () => {
  fc.assert(
    fc.property(edits, (list) => {
      for (const remark of lintChart(indexChart(play(list).present))) expect(remark.message).not.toMatch(/undefined|\[object/)
    }),
  )
})
