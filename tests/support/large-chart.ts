import type { ChartDocument } from '#shared/chart/document.ts'
import { parseChartText } from '#shared/chart/parse.ts'
import { ask, cause, check, proof, reading, reproducing, sketchJson, start, step, type ChartSketch } from './chart-builder.ts'

/**
 * A sound chart of about `size` nodes, for measuring: a long line of checks and readings, each with a step, a proof and a
 * cause of its own, loops back, nodes for some machines, copies of one physical check, accesses and a safety part.
 */
export function largeChart(size: number): ChartDocument {
  const rows = Math.max(1, Math.floor((size - 4) / 4))
  const nodes = [start(), reproducing('n0'), ask('a0', { reason: 'could-not-reproduce' }), ask()]
  const edges = ['s > n0', 'n0.yes > n1', 'n0.no > a0']
  for (let row = 1; row <= rows; row += 1) {
    const next = row === rows ? 'ask' : `n${row + 1}`
    const suspect = `cause-${row % 60}`
    const isReading = row % 3 === 0
    const id = `n${row}`
    const more = {
      needs: [`access-${row % 12}`],
      ...(row % 7 === 0 ? { onlyFor: { classes: ['chain-saw'], otherwise: next } } : {}),
      ...(row % 10 === 1 ? { checkId: 'light' } : {}),
    }
    nodes.push(isReading ? reading(id, { needs: more.needs }) : check(id, ['good', 'bad'], more))
    nodes.push(step(`w${row}`, { do: 'Put the machine on the ground. Set the brake.' }))
    nodes.push(proof(`p${row}`, suspect, { needs: [`access-${row % 12}`], defeats: ['screen'], restores: ['screen'] }), cause(`c${row}`, suspect))
    const again = row % 25 === 0 ? `n${row - 5}` : next
    edges.push(`${id}.${isReading ? 'in' : 'good'} > ${next}`, `${id}.${isReading ? 'low' : 'bad'} > w${row}`)
    edges.push(`w${row} > p${row}`, `p${row}.gone > c${row}`, `p${row}.still > ${again}`)
  }
  return fromText({ id: 'large', nodes, edges, more: { safetyParts: ['screen'] } })
}

/** As a stored chart comes: read from its text. */
function fromText(sketch: ChartSketch): ChartDocument {
  const parsed = parseChartText(JSON.stringify(sketchJson(sketch)))
  if (!parsed.ok) throw new Error(parsed.error.detail)
  return parsed.value
}
