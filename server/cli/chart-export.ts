import { drawChart } from '#shared/plots/chart-picture.ts'
import { pictureThemes, toSvg } from '#shared/plots/svg.ts'
import { readChartsOfFile } from './chart-files.ts'
import { BadInput } from './verb.ts'
import type { Verb } from './verb.ts'

/** `chart export FILE --as svg`: the chart as a drawing of its own, outcomes listed in the boxes; `-` reads standard input. */
export const exportVerb: Verb = {
  usage: 'FILE --as svg',
  does: 'the chart as an SVG drawing',
  run: async (args, io) => {
    const { root, charts } = await readChartsOfFile(fileToExport(args), io)
    const chartTitles = new Map([...charts.values()].map(({ id, chart }) => [id, chart.title]))
    return { text: toSvg(drawChart(root.chart, { outcomes: 'listed', chartTitles }), pictureThemes.light) }
  },
}

function fileToExport(args: readonly string[]): string {
  const at = args.indexOf('--as')
  const format = at === -1 ? undefined : args[at + 1]
  const [file, ...more] = args.filter((_, place) => at === -1 || (place !== at && place !== at + 1))
  if (format !== 'svg') throw new BadInput(`"chart export" needs "--as svg"${format === undefined ? '' : `; "${format}" is no format that it knows`}.`)
  if (file === undefined) throw new BadInput('"chart export" needs a FILE; "-" reads standard input.')
  if (file.startsWith('--') || more.length > 0) throw new BadInput(`"chart export" takes one FILE and "--as svg", but was given "${args.join(' ')}".`)
  return file
}
