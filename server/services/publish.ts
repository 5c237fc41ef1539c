import { eq } from 'drizzle-orm'
import type { ChartVersion } from '#shared/api/charts.ts'
import type { ChartDocument } from '#shared/chart/document.ts'
import { indexChart } from '#shared/chart/graph.ts'
import { hasErrors, lintChart } from '#shared/chart/lint/lint-chart.ts'
import type { Remark } from '#shared/chart/lint/remark.ts'
import type { ChartId } from '#shared/lib/ids.ts'
import type { Db } from '#server/db/client.ts'
import { chartDrafts, charts, chartVersions } from '#server/db/schema/charts.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { writeAudit } from './audit.ts'
import { readNeighbours } from './chart-versions.ts'
import { getDraftWithHash, movedOn, readDocument } from './drafts.ts'
import { bringLibrary } from './library.ts'
import type { CurrentSession } from './sessions.ts'
import { writeSymptoms } from './symptoms.ts'

/** What the chart check says about a document that somebody sent; nothing is stored. */
export async function checkChart(deps: Deps, json: unknown): Promise<Remark[]> {
  return lint(deps, readDocument(json))
}

async function lint(deps: Deps, document: ChartDocument): Promise<Remark[]> {
  const index = indexChart(document)
  return lintChart(index, { others: await readNeighbours(deps, index), missing: 'not-published' })
}

interface Publication {
  readonly chartId: ChartId
  readonly revision: number
  readonly changeNote: string
  readonly acceptsWarnings: boolean
}

/** Publishes a draft as the next version: immutable, found by the symptom search, its library brought to the shop's. */
export async function publishDraft(deps: Deps, by: CurrentSession, { chartId, revision, changeNote, acceptsWarnings }: Publication): Promise<ChartVersion> {
  const draft = await getDraftWithHash(deps.db, chartId)
  if (draft.revision !== revision) throw movedOn(draft)
  const remarks = await lint(deps, draft.document)
  if (hasErrors(remarks))
    throw new AppError('chart-has-errors', 'The chart check found what must be fixed before this can be published.', { members: { remarks } })
  if (!acceptsWarnings && remarks.some(({ severity }) => severity === 'warning')) {
    throw new AppError('warnings-unseen', 'The chart check found things worth a look. Read them, then publish and say that you did.', { members: { remarks } })
  }
  return deps.db.transaction(async (tx) => {
    // Whoever publishes this chart at the same moment waits here, and then finds the number taken.
    const [chart] = await tx.select({ version: charts.version }).from(charts).where(eq(charts.id, chartId)).for('update')
    await requireUnchanged(tx, chartId, revision)
    const version = (chart?.version ?? 0) + 1
    await requireNew(tx, chartId, draft.contentHash, chart?.version ?? null)
    const publishedAt = deps.clock()
    await tx
      .insert(chartVersions)
      .values({ chartId, version, document: draft.document, contentHash: draft.contentHash, changeNote, publishedAt, publishedBy: by.person.id })
    await tx.update(charts).set({ version, title: draft.document.title }).where(eq(charts.id, chartId))
    await writeSymptoms(tx, draft.document, version)
    await bringLibrary(tx, deps, draft.document)
    await writeAudit(tx, deps, { act: 'chart-published', personId: by.person.id, subject: chartId, detail: { version } })
    return { chartId, version, document: draft.document, publishedAt: publishedAt.toISOString(), publishedBy: by.person.name, changeNote }
  })
}

async function requireUnchanged(tx: Db, chartId: ChartId, revision: number): Promise<void> {
  const [row] = await tx.select({ revision: chartDrafts.revision }).from(chartDrafts).where(eq(chartDrafts.chartId, chartId)).for('update')
  if (row?.revision !== revision) throw movedOn(await getDraftWithHash(tx, chartId))
}

async function requireNew(tx: Db, chartId: ChartId, contentHash: string, version: number | null): Promise<void> {
  const hashes =
    version === null
      ? []
      : await tx
          .select({ version: chartVersions.version, contentHash: chartVersions.contentHash })
          .from(chartVersions)
          .where(eq(chartVersions.chartId, chartId))
  if (hashes.some((row) => row.version === version && row.contentHash === contentHash)) {
    throw new AppError('already-published', `Version ${String(version)} says exactly this already: there is nothing new to publish.`)
  }
}
