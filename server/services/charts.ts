import { asc, eq, isNotNull, sql } from 'drizzle-orm'
import type { ChartRow } from '#shared/api/charts.ts'
import type { EngineKind, EquipmentClass } from '#shared/trade/equipment.ts'
import { hasRole } from '#shared/trade/roles.ts'
import { chartDrafts, charts, chartVersions } from '#server/db/schema/charts.ts'
import type { Deps } from '#server/lib/deps.ts'
import type { CurrentSession } from './sessions.ts'

type Starts = ChartRow['starts']

/** The part of a document that a list shows, taken out by the database: documents are large. */
const newest = sql`coalesce(${chartVersions.document}, ${chartDrafts.document})`
const part = <T>(path: string) => sql<T | null>`${newest} #> ${path}::text[]`
const starts = sql<{ id: string; title?: string }[]>`jsonb_path_query_array(${newest}, '$.nodes[*] ? (@.kind == "start")')`

/** All charts; those that were never published are shown to leads alone. */
export async function listCharts(deps: Deps, by: CurrentSession): Promise<ChartRow[]> {
  const rows = await deps.db
    .select({
      id: charts.id,
      title: charts.title,
      version: charts.version,
      publishedAt: chartVersions.publishedAt,
      hasDraft: sql<boolean>`${chartDrafts.contentHash} is not null and ${chartDrafts.contentHash} is distinct from ${chartVersions.contentHash}`,
      basis: part<ChartRow['basis']>('{basis}'),
      starts,
      classes: part<EquipmentClass[]>('{appliesTo,classes}'),
      engines: part<EngineKind[]>('{appliesTo,engines}'),
    })
    .from(charts)
    .leftJoin(chartVersions, sql`${chartVersions.chartId} = ${charts.id} and ${chartVersions.version} = ${charts.version}`)
    .leftJoin(chartDrafts, eq(chartDrafts.chartId, charts.id))
    .where(hasRole(by.person.role, 'lead') ? undefined : isNotNull(charts.version))
    .orderBy(asc(sql`lower(${charts.title})`), asc(charts.id))
  return rows.map((row) => ({
    ...row,
    basis: row.basis ?? 'own',
    publishedAt: row.publishedAt?.toISOString() ?? null,
    starts: row.starts.map(({ id, title }) => ({ id: id as Starts[number]['id'], title: title ?? row.title })),
    classes: row.classes ?? [],
    engines: row.engines ?? [],
  }))
}
