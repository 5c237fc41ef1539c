import { useMemo } from 'react'

import type { ChartVersion } from '#shared/api/charts.ts'
import type { ChartId, Place } from '#shared/lib/ids.ts'
import { splitPlace, toPlace } from '#shared/lib/ids.ts'
import { drawChart } from '#shared/plots/chart-picture.ts'
import { routeOnChart } from '#shared/plots/picture-route.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import type { PinnedCharts } from '#shared/walk/pinned-charts.ts'
import { routeLegs } from '#shared/walk/review.ts'
import type { StartedWalk } from '#shared/walk/state.ts'
import { ChartPicture } from '#src/components/chart-picture/chart-picture.tsx'

type RoutePictureProps = {
  readonly walk: StartedWalk
  readonly charts: PinnedCharts
  readonly versions: readonly ChartVersion[]
  readonly format: NumberFormat
  readonly selected: Place | null
  readonly onSelect: (place: Place) => void
  /** The chart that is shown, of those that the walk crossed. */
  readonly chartId: ChartId
  readonly onChart: (chartId: ChartId) => void
}

/** The charts that the walk crossed, in the order in which it came to them. */
export function chartsCrossed(charts: PinnedCharts, walk: StartedWalk): readonly ChartId[] {
  const places = [walk.start, ...routeLegs(charts, walk).flatMap(({ from, to }) => [from, to])]
  return [...new Set(places.map((place) => splitPlace(place).chartId))]
}

/** The chart with the way of the walk through it; one button for each chart that was crossed. */
export function RoutePicture({ walk, charts, versions, format, selected, onSelect, chartId, onChart }: RoutePictureProps) {
  const crossed = useMemo(() => chartsCrossed(charts, walk), [charts, walk])
  const version = versions.find((each) => each.chartId === chartId && each.version === walk.pins[chartId]) ?? versions.find((each) => each.chartId === chartId)
  const picture = useMemo(
    () =>
      version === undefined
        ? null
        : drawChart(version.document, {
            route: routeOnChart(chartId, routeLegs(charts, walk), walk.node),
            scope: 'near-route',
            format,
            specLimits: walk.limits,
            machine: walk.machine,
            chartTitles: new Map(versions.map((each) => [each.chartId, each.document.title])),
          }),
    [version, charts, walk, chartId, format, versions],
  )
  const chosen = selected === null ? null : splitPlace(selected)
  return (
    <div className="flex min-h-0 flex-col">
      {crossed.length > 1 && (
        <div role="group" aria-label="Charts of this walk" className="flex flex-wrap gap-x-6 border-b border-hair px-4">
          {crossed.map((id) => (
            <button
              key={id}
              type="button"
              aria-pressed={id === chartId}
              onClick={() => onChart(id)}
              className="min-h-10 border-y-3 border-transparent font-medium text-ink-2 aria-pressed:border-b-cord aria-pressed:text-ink"
            >
              {versions.find((each) => each.chartId === id)?.document.title ?? id}
            </button>
          ))}
        </div>
      )}
      {picture === null ? (
        <p className="p-4 text-ink-2">This chart is not to be had.</p>
      ) : (
        <ChartPicture
          picture={picture}
          highlight={chosen !== null && chosen.chartId === chartId ? chosen.nodeId : null}
          onSelect={(nodeId) => onSelect(toPlace(chartId, nodeId))}
          className="min-h-0 grow p-4"
        />
      )}
    </div>
  )
}
