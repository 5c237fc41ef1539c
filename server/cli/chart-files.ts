import { readdir } from 'node:fs/promises'
import { basename, dirname, join } from 'node:path'

import type { ChartId } from '#shared/lib/ids.ts'
import { chartsNamedBy, type ChartSet } from '#shared/chart/chart-set.ts'
import { indexChart, type ChartIndex } from '#shared/chart/graph.ts'
import { parseChartText } from '#shared/chart/parse.ts'
import { BadInput } from './verb.ts'
import type { Io } from './verb.ts'

/** Largest chart file that the command line reads. */
const mostBytes = 50 * 1024 * 1024

/** A chart read from a file, and the charts in its reach that lie beside it; the chart itself is among them. */
export type ChartsOfFile = { readonly root: ChartIndex; readonly charts: ChartSet }

/**
 * Reads a chart (`-`: standard input) and, from the folder of its file, every chart that its jumps lead to: `<id>.json`
 * first, else whichever JSON file there holds that id. A file beside it that is no chart is passed over with a note.
 */
export async function readChartsOfFile(file: string, io: Io): Promise<ChartsOfFile> {
  const root = await readChart(file, io)
  const charts = new Map<ChartId, ChartIndex>([[root.id, root]])
  if (file === '-') return { root, charts }
  const beside = folderOf(file, io)
  for (const index of charts.values()) {
    for (const id of chartsNamedBy(index)) {
      if (charts.has(id)) continue
      const found = await beside(id)
      if (found !== undefined) charts.set(id, found)
    }
  }
  return { root, charts }
}

async function readChart(file: string, io: Io): Promise<ChartIndex> {
  const name = file === '-' ? 'Standard input' : file
  const text = await io.read(file)
  if (Buffer.byteLength(text) > mostBytes) throw new BadInput(`${name} is larger than 50 MB, which is the most that a chart file may be.`)
  const parsed = parseChartText(text)
  if (parsed.ok) return indexChart(parsed.value)
  const pointer = parsed.error.errors[0]?.pointer ?? '#'
  throw new BadInput(`${name}: ${parsed.error.detail}${pointer === '#' ? '' : ` [${pointer}]`}`)
}

/** Finds charts in the folder of a file. Files named otherwise than their chart are read only when an id asks for them. */
function folderOf(file: string, io: Io): (id: ChartId) => Promise<ChartIndex | undefined> {
  const folder = dirname(file)
  const known = new Map<string, ChartIndex | undefined>()
  const read = async (name: string): Promise<ChartIndex | undefined> => {
    if (known.has(name)) return known.get(name)
    const chart = await readChart(join(folder, name), io).catch((error: unknown) => {
      if (!(error instanceof BadInput)) throw error
      if (!/"pullcord-chart"/.test(error.message)) io.note(`Passed over ${error.message}`)
      return undefined
    })
    known.set(name, chart)
    return chart
  }
  return async (id) => {
    const names = (await readdir(folder)).filter((name) => name.endsWith('.json') && name !== basename(file)).sort()
    const own = names.filter((name) => name === `${id}.json`)
    for (const name of [...own, ...names.filter((other) => other !== `${id}.json`)]) {
      const chart = await read(name)
      if (chart?.id === id) return chart
    }
    return undefined
  }
}
