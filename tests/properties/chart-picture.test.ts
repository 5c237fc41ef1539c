import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import type { ChartDocument } from '#shared/chart/document.ts'
import { indexChart } from '#shared/chart/graph.ts'
import { layoutChart } from '#shared/chart/layout/layout-chart.ts'
import { balloonRadius, type PlacedNode, type Point } from '#shared/chart/layout/sheet.ts'
import { drawChart } from '#shared/plots/chart-picture.ts'
import type { Picture } from '#shared/plots/marks.ts'
import { pictureThemes, toSvg } from '#shared/plots/svg.ts'
import { textWidth } from '#shared/plots/text-width.ts'
import { styleOf } from '#shared/plots/mark-style.ts'
import { buildChart } from '#tests/support/chart-builder.ts'

type Json = Readonly<Record<string, unknown>>
const kinds = ['step', 'check', 'check', 'check', 'reading', 'proof', 'proof', 'cause', 'cause', 'jump', 'comes-back', 'escalate', 'hold', 'back'] as const
const titles = fc.oneof(fc.lorem({ maxCount: 12 }), fc.string({ maxLength: 120 }), fc.constant('Incomprehensibilities'.repeat(5)), fc.constant(''))

/** Charts of any shape that the door lets in: loops, nodes that nothing reaches, ends that many share, outcomes that lead nowhere. */
const anyChart: fc.Arbitrary<ChartDocument> = fc
  .array(fc.record({ kind: fc.constantFrom(...kinds), title: titles, outcomes: fc.integer({ min: 2, max: 9 }), targets: fc.array(fc.integer({ min: -3, max: 6 }), { minLength: 9, maxLength: 9 }), far: fc.nat(40), normal: fc.nat(8) }), { minLength: 1, maxLength: 45 })
  .map((sketches) => {
    const nodes: Json[] = [{ id: 's', kind: 'start', title: 'Start' }]
    const edges: Json[] = [{ from: 's', to: 'x0' }]
    const target = (from: number, offset: number, far: number): string => `x${Math.abs(from + (offset === 6 ? far : offset)) % sketches.length}`
    sketches.forEach(({ kind, title, outcomes, targets, far, normal }, at) => {
      const id = `x${at}`
      const ways = Array.from({ length: outcomes }, (_, place) => ({ id: `o${place}`, title: `Way ${place}`, normal: place === normal, ...(kind === 'proof' ? { confirms: place === 0, normal: false } : {}) }))
      const decision = { id, title, outcomes: ways }
      if (kind === 'check' || kind === 'proof' || kind === 'reading') {
        nodes.push({ ...decision, kind, ...(kind === 'reading' ? { quantity: 'length', unit: 'mm', limits: { min: 1, max: 2 } } : {}), ...(kind === 'proof' ? { suspect: 'c' } : {}) })
        ways.forEach((way, place) => edges.push({ from: id, outcome: way.id, to: target(at, targets[place] ?? 1, far) }))
      } else if (kind === 'step') {
        nodes.push({ id, kind, title, ...(far % 5 === 0 ? { onlyFor: { otherwise: target(at, 2, far) } } : {}) })
        edges.push({ from: id, to: target(at, targets[0] ?? 1, far) })
      } else if (kind === 'comes-back') {
        nodes.push({ id, kind: 'jump', title, chart: 'other', returns: true })
        edges.push({ from: id, to: target(at, targets[0] ?? 1, far) })
      } else nodes.push(kind === 'cause' ? { id, kind, causeId: 'c' } : kind === 'jump' ? { id, kind, title, chart: 'other' } : { id, kind, title })
    })
    return buildChart({ nodes, edges: [], causes: [{ id: 'c', title: 'A cause', system: 'fuel' }], more: { edges } })
  })

const sizes = { width: 190, height: 60, above: 13 }
const runs = { numRuns: 60 }

function overlap(a: PlacedNode, b: PlacedNode, room: number): boolean {
  return a.x - room < b.x + b.width && b.x - room < a.x + a.width && a.y - a.above - room < b.y + b.height && b.y - b.above - room < a.y + a.height
}

function touches(a: Point, b: Point, node: PlacedNode): boolean {
  return Math.max(a.x, b.x) > node.x + 1 && Math.min(a.x, b.x) < node.x + node.width - 1 && Math.max(a.y, b.y) > node.y + 1 && Math.min(a.y, b.y) < node.y + node.height - 1
}

function covers({ x, y }: Point, node: PlacedNode): boolean {
  return x + balloonRadius > node.x + 1 && x - balloonRadius < node.x + node.width - 1 && y + balloonRadius > node.y + 1 && y - balloonRadius < node.y + node.height - 1
}

/** Room for a machine that does other work beside the tests. */
const patient = { timeout: 60_000 }

describe('a chart laid out', patient, () => {
  test('has no two nodes that overlap or crowd each other, and all of them on the sheet', () => {
    fc.assert(
      fc.property(anyChart, (chart) => {
        const { nodes, width, height } = layoutChart(indexChart(chart), () => sizes)
        expect(nodes).toHaveLength(new Set(chart.nodes.map(({ id }) => id)).size)
        expect(nodes.flatMap((a, at) => nodes.slice(at + 1).filter((b) => overlap(a, b, 8)).map((b) => `${a.id} on ${b.id}`))).toEqual([])
        expect(nodes.filter(({ x, y, above }) => x < 0 || y - above < 0 || x + sizes.width > width || y + sizes.height > height)).toEqual([])
      }),
      runs,
    )
  })

  test('has right-angled lines that cross no node', () => {
    fc.assert(
      fc.property(anyChart, (chart) => {
        const { nodes, links, width, height } = layoutChart(indexChart(chart), () => sizes)
        const faults = links.flatMap(({ link, points }) =>
          points.slice(1).flatMap((point, at) => {
            const before = points[at] ?? point
            const isSkew = point.x !== before.x && point.y !== before.y
            const isOut = point.x < 0 || point.y < 0 || point.x > width || point.y > height
            const through = nodes.filter((node) => touches(before, point, node))
            return isSkew || isOut || through.length > 0 ? [{ from: link.from, to: link.to, isSkew, isOut, through: through.map(({ id }) => id) }] : []
          }),
        )
        expect(faults).toEqual([])
      }),
      runs,
    )
  })

  test('shows every way out with its balloon, and no balloon covers another or a node', () => {
    fc.assert(
      fc.property(anyChart, (chart) => {
        const { nodes, links } = layoutChart(indexChart(chart), () => sizes)
        const balloons = links.flatMap(({ link, balloons: points }) => link.outcomes.map((outcome, at) => ({ key: `${link.from} ${outcome}`, at: points[at] })))
        const ways = chart.edges.flatMap(({ from, outcome }) => (outcome === undefined ? [] : [`${from} ${outcome}`]))
        expect(balloons.map(({ key }) => key).toSorted()).toEqual(ways.toSorted())
        const faults = balloons.flatMap((a, at) => {
          const middle = a.at ?? { x: Number.NaN, y: Number.NaN }
          const covered = balloons.slice(at + 1).filter((b) => !(Math.hypot(middle.x - (b.at?.x ?? 0), middle.y - (b.at?.y ?? 0)) >= 2 * balloonRadius - 2))
          const under = nodes.filter((node) => covers(middle, node))
          return covered.length + under.length === 0 ? [] : [{ balloon: a.key, covers: [...covered.map(({ key }) => key), ...under.map(({ id }) => id)] }]
        })
        expect(faults).toEqual([])
      }),
      runs,
    )
  })

  test('keeps the places that a document gives to all of its nodes', () => {
    fc.assert(
      fc.property(anyChart, fc.array(fc.record({ x: fc.integer({ min: -2000, max: 2000 }), y: fc.integer({ min: -2000, max: 2000 }) }), { minLength: 46, maxLength: 46 }), (chart, places) => {
        const positions = Object.fromEntries(chart.nodes.map(({ id }, at) => [id, places[at] ?? { x: 0, y: 0 }]))
        const { nodes, links } = layoutChart(indexChart({ ...chart, positions } as ChartDocument), () => sizes)
        const [first] = nodes
        if (first === undefined) throw new Error('The chart has a start.')
        const shift = { x: first.x - (positions[first.id]?.x ?? 0), y: first.y - (positions[first.id]?.y ?? 0) }
        for (const node of nodes) expect({ x: node.x - shift.x, y: node.y - shift.y }).toEqual(positions[node.id])
        const balloons = links.reduce((sum, { balloons: points }) => sum + points.length, 0)
        expect(balloons).toBe(chart.edges.filter(({ outcome }) => outcome !== undefined).length)
      }),
      { numRuns: 60 },
    )
  })
})

describe('a picture', patient, () => {
  const drawn = fc.tuple(anyChart, fc.constantFrom('listed' as const, 'numerals' as const)).map(([chart, outcomes]) => drawChart(chart, { outcomes }))

  test('has every line of text inside the box of its node', () => {
    fc.assert(
      fc.property(drawn, (picture) => {
        expect(textsOutside(picture)).toEqual([])
      }),
      runs,
    )
  })

  test('is the same file every time', () => {
    fc.assert(
      fc.property(anyChart, (chart) => {
        expect(toSvg(drawChart(chart), pictureThemes.light)).toBe(toSvg(drawChart(chart), pictureThemes.light))
      }),
      { numRuns: 25 },
    )
  })
})

function textsOutside(picture: Picture): string[] {
  return picture.groups.flatMap((group) => {
    if (group.of !== 'node') return []
    const { x, y, width, height } = group.box
    return group.marks.flatMap((mark) => {
      if (mark.kind !== 'text') return []
      const { font } = styleOf(mark.role, mark.tone)
      const wide = textWidth(mark.text, font?.size ?? 0, font?.face, font?.tracking)
      const left = mark.anchor === 'middle' ? mark.at.x - wide / 2 : mark.at.x
      const isInside = left >= x && left + wide <= x + width && mark.at.y - (font?.size ?? 0) * 0.75 >= y && mark.at.y + 3 <= y + height
      return isInside ? [] : [`${group.node}: ${mark.text}`]
    })
  })
}
