import { and, eq, inArray, isNotNull, or } from 'drizzle-orm'
import type { ChartVersion } from '#shared/api/charts.ts'
import { chartsNamedBy, type ChartLookup } from '#shared/chart/chart-set.ts'
import type { ChartDocument } from '#shared/chart/document.ts'
import { indexChart, type ChartIndex } from '#shared/chart/graph.ts'
import { parseChart } from '#shared/chart/parse.ts'
import type { ChartId, PersonId } from '#shared/lib/ids.ts'
import type { Db } from '#server/db/client.ts'
import { charts, chartVersions } from '#server/db/schema/charts.ts'
import { people } from '#server/db/schema/people.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { Lru } from './lru.ts'

/** A version as the server keeps it at hand: read through the chart door and indexed once. */
export interface StoredVersion {
  readonly chartId: ChartId
  readonly version: number
  readonly document: ChartDocument
  readonly index: ChartIndex
  readonly publishedAt: Date
  readonly publishedBy: PersonId
  readonly changeNote: string
}

/** A version by name. */
export interface VersionName {
  readonly chartId: ChartId
  readonly version: number
}

const toKey = ({ chartId, version }: VersionName) => `${chartId}@${version}`
const kept = new WeakMap<Db, Lru<string, StoredVersion>>()

/** Published versions never change, so one that was read is good for as long as there is room for it. */
function keptVersions(deps: Deps): Lru<string, StoredVersion> {
  const known = kept.get(deps.db) ?? new Lru<string, StoredVersion>(300)
  kept.set(deps.db, known)
  return known
}

/** Opens a stored document by the one door; what was stored once can always be read. */
export function openDocument(json: unknown): ChartDocument {
  const parsed = parseChart(json)
  if (!parsed.ok) throw new Error(`A stored chart can't be read: ${parsed.error.detail}`)
  return parsed.value
}

/** The named versions that exist. `db` is the transaction's own inside one. */
export async function readVersions(deps: Deps, names: readonly VersionName[], db: Db = deps.db): Promise<StoredVersion[]> {
  const known = keptVersions(deps)
  const missing = names.filter((name) => known.get(toKey(name)) === undefined)
  const fresh =
    missing.length === 0
      ? []
      : await db
          .select()
          .from(chartVersions)
          .where(or(...missing.map(isVersion)))
  const read = fresh.map((row): StoredVersion => {
    const document = openDocument(row.document)
    return { ...row, document, index: indexChart(document) }
  })
  for (const version of read) known.set(toKey(version), version)
  const byKey = new Map(read.map((version) => [toKey(version), version]))
  return names.flatMap((name) => byKey.get(toKey(name)) ?? known.get(toKey(name)) ?? [])
}

function isVersion({ chartId, version }: VersionName) {
  return and(eq(chartVersions.chartId, chartId), eq(chartVersions.version, version))
}

/** Numbers of the newest versions of the charts that have one. */
async function readNewest(db: Db, ids: readonly ChartId[]): Promise<VersionName[]> {
  const rows = await db
    .select({ chartId: charts.id, version: charts.version })
    .from(charts)
    .where(and(inArray(charts.id, [...ids]), isNotNull(charts.version)))
  return rows.flatMap(({ chartId, version }) => (version === null ? [] : [{ chartId, version }]))
}

/** The newest versions of the charts and of every chart that their fixed jumps reach, nearest first. */
export async function readReach(deps: Deps, from: readonly ChartId[], db: Db = deps.db): Promise<StoredVersion[]> {
  const reach = new Map<ChartId, StoredVersion>()
  const asked = new Set(from)
  for (let next = [...from]; next.length > 0;) {
    const found = await readVersions(deps, await readNewest(db, next), db)
    for (const version of found) reach.set(version.chartId, version)
    next = found.flatMap(({ index }) => chartsNamedBy(index)).filter((id) => !asked.has(id))
    for (const id of next) asked.add(id)
  }
  return [...reach.values()]
}

/** The published charts around one, for the chart check. */
export async function readNeighbours(deps: Deps, index: ChartIndex): Promise<ChartLookup> {
  const reach = new Map((await readReach(deps, chartsNamedBy(index))).map((version) => [version.chartId, version.index]))
  return (id) => reach.get(id)
}

/** Versions as the API gives them, with the name of who published each. */
export async function toChartVersions(db: Db, versions: readonly StoredVersion[]): Promise<ChartVersion[]> {
  const ids = [...new Set(versions.map(({ publishedBy }) => publishedBy))]
  const names = new Map(
    ids.length === 0
      ? []
      : (await db.select({ id: people.id, name: people.name }).from(people).where(inArray(people.id, ids))).map(({ id, name }) => [id, name]),
  )
  return versions.map(({ chartId, version, document, publishedAt, publishedBy, changeNote }) => ({
    chartId,
    version,
    document,
    publishedAt: publishedAt.toISOString(),
    publishedBy: names.get(publishedBy) ?? '',
    changeNote,
  }))
}

/** One published version. */
export async function getVersion(deps: Deps, name: VersionName): Promise<ChartVersion> {
  const [version] = await toChartVersions(deps.db, await readVersions(deps, [name]))
  if (version === undefined) throw new AppError('not-found', 'There is no such version of this chart.')
  return version
}

/** What a walk that starts in a chart pins: its newest version and that of every chart in its reach, itself first. */
export async function getReach(deps: Deps, chartId: ChartId): Promise<ChartVersion[]> {
  const reach = await readReach(deps, [chartId])
  if (reach.length === 0) throw new AppError('not-found', 'This chart has no published version.')
  return toChartVersions(deps.db, reach)
}
