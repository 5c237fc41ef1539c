import { indexChart } from '#shared/chart/graph.ts'
import { lintChart } from '#shared/chart/lint/lint-chart.ts'
import { largeChart } from '#tests/support/large-chart.ts'
import { median, type Measured } from './report.ts'

const sizes = { small: 1_000, large: 10_000 }
const rounds = 7

/** The chart check of ten times the nodes, beside the small one in the same run: near-linear means little more than ten times as long. */
export function measureChartCheck(): Measured {
  const charts = { small: largeChart(sizes.small), large: largeChart(sizes.large) }
  const time = (chart: (typeof charts)['small']): number => {
    const startedAt = performance.now()
    lintChart(indexChart(chart))
    return performance.now() - startedAt
  }
  for (let warm = 0; warm < 5; warm += 1) time(charts.small)
  const small = Array.from({ length: rounds }, () => time(charts.small))
  const large = Array.from({ length: rounds }, () => time(charts.large))
  return { what: 'chart check of 10 000 nodes', ratio: median(large) / median(small), against: 'the time for 1 000 nodes', goal: { atMost: 12 }, detail: `${median(large).toFixed(0)} ms beside ${median(small).toFixed(1)} ms` }
}
