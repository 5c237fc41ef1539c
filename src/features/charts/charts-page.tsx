import { useQuery } from '@tanstack/react-query'

import type { ChartRow } from '#shared/api/charts.ts'
import { equipmentClasses, equipmentClassWords } from '#shared/trade/equipment.ts'
import { chartQueries } from '#src/api/charts.ts'
import { EmptyState } from '#src/components/ui/empty-state.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import type { RuledColumn } from '#src/components/ui/ruled.tsx'
import { RuledTable } from '#src/components/ui/ruled.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { formatDay } from '#src/lib/format.ts'
import { paths } from '#src/lib/paths.ts'
import { toWords } from '#src/lib/problem-words.ts'

/** The charts of the shop, each with the version that is on the bench. */
export function ChartsPage() {
  const { data, error, isPending } = useQuery(chartQueries.list())
  return (
    <div className="max-w-sheet pt-6">
      {isPending && <Placeholder words="Reading the charts" rows={4} />}
      {error !== null && (
        <Notice state="bad" title="The charts could not be read">
          {toWords(error)}
        </Notice>
      )}
      {data !== undefined && data.charts.length === 0 && (
        <EmptyState title="No charts yet">A chart leads from a symptom to a proven cause. The lead publishes them.</EmptyState>
      )}
      {data !== undefined && data.charts.length > 0 && <RuledTable caption="Charts of the shop" columns={columns} rows={data.charts} rowKey={({ id }) => id} />}
    </div>
  )
}

const columns: readonly RuledColumn<ChartRow>[] = [
  {
    key: 'title',
    head: 'Chart',
    isRowHead: true,
    cell: ({ id, title, version }) => (version === null ? title : <TextLink to={paths.chart(id)}>{title}</TextLink>),
  },
  { key: 'starts', head: 'Starts with', cell: ({ starts }) => starts.map(({ title }) => title).join('; ') },
  { key: 'machines', head: 'Machines', cell: toMachines },
  {
    key: 'version',
    head: 'On the bench',
    cell: ({ version, publishedAt, hasDraft }) => (
      <span className="flex flex-wrap gap-x-4">
        {version === null || publishedAt === null ? (
          <StateMark state="open">not published</StateMark>
        ) : (
          <span className="whitespace-nowrap">{`v${version}, ${formatDay(publishedAt)}`}</span>
        )}
        {hasDraft && version !== null && <StateMark state="info">draft</StateMark>}
      </span>
    ),
  },
  { key: 'basis', head: 'Basis', cell: ({ basis }) => (basis === 'own' ? 'our own' : 'printed table') },
]

function toMachines({ classes }: ChartRow): string {
  if (classes.length === 0 || classes.length === equipmentClasses.length) return 'any'
  return classes.map((name) => equipmentClassWords[name].toLowerCase()).join(', ')
}
