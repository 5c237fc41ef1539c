import { mustPass } from '#shared/chart/chart-set.ts'
import { hasErrors, lintChart } from '#shared/chart/lint/lint-chart.ts'
import { exportVerb } from './chart-export.ts'
import { readChartsOfFile } from './chart-files.ts'
import { BadInput } from './verb.ts'
import type { VerbTable } from './verb.ts'

/** `chart check FILE`, `chart musts FILE` and `chart export FILE`; `-` reads standard input, jumps resolve among the files beside FILE. */
export const chartVerbs: VerbTable = {
  check: {
    usage: 'FILE',
    does: 'what the chart check has to say; status 1 when something must be fixed',
    run: async (args, io) => {
      const { root, charts } = await readChartsOfFile(oneFile('check', args), io)
      const remarks = lintChart(root, { others: (id) => charts.get(id), missing: 'not-beside' })
      return { json: { remarks }, failed: hasErrors(remarks) }
    },
  },
  musts: {
    usage: 'FILE',
    does: 'for every cause, the nodes that every route to it passes',
    run: async (args, io) => {
      const { root, charts } = await readChartsOfFile(oneFile('musts', args), io)
      return { json: { causes: Object.fromEntries(mustPass(root, charts)) } }
    },
  },
  export: exportVerb,
}

function oneFile(verb: string, args: readonly string[]): string {
  const [file, ...more] = args
  if (file === undefined) throw new BadInput(`"chart ${verb}" needs a FILE; "-" reads standard input.`)
  if (file.startsWith('--') || more.length > 0) throw new BadInput(`"chart ${verb}" takes one FILE and nothing else, but was given "${args.join(' ')}".`)
  return file
}
