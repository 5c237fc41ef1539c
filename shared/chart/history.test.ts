import { describe, expect, test } from 'vitest'
import { buildChart, soundSketch } from '#tests/support/chart-builder.ts'
import type { ChartCommand } from './commands.ts'
import { applyToHistory, endGesture, mostSteps, redo, startHistory, undo, type ChartHistory } from './history.ts'

const opened = startHistory(buildChart(soundSketch))
const nudge = { type: 'move-nodes', nodeIds: ['n2'], by: { x: 1, y: 0 } } as unknown as ChartCommand
const rename = (title: string) => ({ type: 'rename-node', nodeId: 'n2', title }) as unknown as ChartCommand

function make(history: ChartHistory, command: ChartCommand, gesture?: string): ChartHistory {
  const made = applyToHistory(history, command, gesture === undefined ? {} : { gesture })
  if (!made.ok) throw new Error(made.error.detail)
  return made.value
}

describe('undo and redo', () => {
  test('undo brings back the very document before, redo the one after', () => {
    const renamed = make(opened, rename('Other'))
    expect(undo(renamed).present).toBe(opened.present)
    expect(redo(undo(renamed)).present).toBe(renamed.present)
  })

  test('at either end nothing happens', () => {
    expect(undo(opened)).toBe(opened)
    expect(redo(opened)).toBe(opened)
  })

  test('a new edit ends what could be redone', () => {
    const other = make(undo(make(opened, rename('One'))), rename('Two'))
    expect(redo(other)).toBe(other)
  })

  test('an edit that changes nothing, and one that is refused, are no steps', () => {
    expect(make(opened, rename('Look at n2'))).toBe(opened)
    expect(applyToHistory(opened, { type: 'rename-node', nodeId: 'gone', title: 'x' } as unknown as ChartCommand)).toMatchObject({
      ok: false,
      error: { code: 'no-such-node' },
    })
  })

  test('very old steps are forgotten', () => {
    const long = Array.from({ length: mostSteps + 5 }).reduce<ChartHistory>((history) => make(history, nudge), opened)
    expect(long.past).toHaveLength(mostSteps)
  })
})

describe('gestures', () => {
  test('a burst of one gesture is undone at once', () => {
    const moved = make(make(make(opened, nudge, 'arrow-keys'), nudge, 'arrow-keys'), nudge, 'arrow-keys')
    expect(moved.present.positions).toEqual({ n2: { x: 3, y: 0 } })
    expect(undo(moved).present).toBe(opened.present)
  })

  test('another gesture, another edit, its end or an undo begin a new step', () => {
    const first = make(opened, nudge, 'arrow-keys')
    for (const between of [make(first, rename('Other')), make(first, nudge, 'drag'), endGesture(first), redo(undo(first))]) {
      const second = make(between, nudge, 'arrow-keys')
      expect(undo(second).present).toBe(between.present)
    }
  })

  test('edits without a gesture are steps of their own', () => {
    expect(undo(make(make(opened, nudge), nudge)).present.positions).toEqual({ n2: { x: 1, y: 0 } })
  })
})
