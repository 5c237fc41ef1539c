import { useQuery } from '@tanstack/react-query'
import { useMemo } from 'react'

import type { ChartVersion } from '#shared/api/charts.ts'
import type { ChartId } from '#shared/lib/ids.ts'
import { drawChart } from '#shared/plots/chart-picture.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import { chartQueries } from '#src/api/charts.ts'
import { ChartPicture } from '#src/components/chart-picture/chart-picture.tsx'
import { Button, ButtonLink } from '#src/components/ui/button.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { formatDay } from '#src/lib/format.ts'
import { paths } from '#src/lib/paths.ts'
import { toWords } from '#src/lib/problem-words.ts'

type ChartSheetProps = { readonly chartId: ChartId; readonly version: number; readonly format: NumberFormat }

/** One published chart as a drawing, to be read: every node with its number, every outcome with its balloon. */
export function ChartSheet({ chartId, version, format }: ChartSheetProps) {
  const { data, error } = useQuery(chartQueries.version(chartId, version))
  if (error !== null) {
    return (
      <Notice state="bad" title="The chart could not be read" className="mt-6">
        {toWords(error)}
      </Notice>
    )
  }
  return data === undefined ? <Placeholder words="Reading the chart" rows={6} /> : <Drawing chart={data} format={format} />
}

function Drawing({ chart, format }: { readonly chart: ChartVersion; readonly format: NumberFormat }) {
  const charts = useQuery(chartQueries.list())
  const titles = charts.data?.charts
  const picture = useMemo(
    () => drawChart(chart.document, { outcomes: 'listed', format, chartTitles: new Map((titles ?? []).map(({ id, title }) => [id, title])) }),
    [chart, format, titles],
  )
  return (
    <div className="pt-3 pb-6">
      <div data-screen-only className="flex flex-wrap items-center justify-between gap-x-6 gap-y-2 pb-3">
        <p className="flex flex-wrap items-baseline gap-x-4 text-small text-ink-2">
          <TextLink to={paths.charts()} className="py-1">
            All charts
          </TextLink>
          <span>
            Version {chart.version}, {formatDay(chart.publishedAt)}, {chart.publishedBy}: {chart.changeNote}
          </span>
        </p>
        <span className="flex gap-x-2">
          <Button look="plain" onClick={() => window.print()}>
            Print
          </Button>
          <ButtonLink to={paths.startWalk(chart.chartId)}>Walk it</ButtonLink>
        </span>
      </div>
      <ChartPicture picture={picture} className="max-h-[calc(100dvh-9rem)] border border-hair p-4 print:max-h-none print:border-0" />
      <p className="pt-3 text-small text-ink-2">The maker’s manual, local codes and licensed practice come first.</p>
    </div>
  )
}
