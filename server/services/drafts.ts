import { and, eq, lte, sql } from 'drizzle-orm'
import type { z } from 'zod'
import type { draftSchema } from '#shared/api/charts.ts'
import type { ChartDocument } from '#shared/chart/document.ts'
import { parseChart, type ChartProblem } from '#shared/chart/parse.ts'
import type { ChartId } from '#shared/lib/ids.ts'
import type { Db } from '#server/db/client.ts'
import { chartDraftRevisions, chartDrafts, charts } from '#server/db/schema/charts.ts'
import { people } from '#server/db/schema/people.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { openDocument } from './chart-versions.ts'
import { hashContent } from './content-hash.ts'
import type { CurrentSession } from './sessions.ts'

/** A draft as the API gives it. */
export type Draft = z.output<typeof draftSchema>

const revisionsKept = 50
const problemOf: Readonly<Record<ChartProblem['code'], 'not-a-chart' | 'too-new' | 'invalid-chart'>> = {
  'not-a-chart': 'not-a-chart',
  'too-new': 'too-new',
  invalid: 'invalid-chart',
}

/** Reads a document that somebody sent, by the one door; the pointers are those of the body that held it. */
export function readDocument(json: unknown): ChartDocument {
  const parsed = parseChart(json)
  if (parsed.ok) return parsed.value
  const errors = parsed.error.errors.map(({ pointer, detail }) => ({ pointer: `#/document${pointer.slice(1)}`, detail }))
  throw new AppError(problemOf[parsed.error.code], parsed.error.detail, { errors })
}

/** The strong tag of a draft's state. */
export function toTag(revision: number): string {
  return `"r${revision}"`
}

async function findDraft(db: Db, chartId: ChartId): Promise<(Draft & { contentHash: string }) | null> {
  const [row] = await db
    .select({ draft: chartDrafts, savedBy: people.name })
    .from(chartDrafts)
    .innerJoin(people, eq(people.id, chartDrafts.savedBy))
    .where(eq(chartDrafts.chartId, chartId))
  if (row === undefined) return null
  const { draft, savedBy } = row
  return {
    chartId,
    revision: draft.revision,
    document: openDocument(draft.document),
    savedAt: draft.savedAt.toISOString(),
    savedBy,
    contentHash: draft.contentHash,
  }
}

/** The draft of a chart with the hash of its content. */
export async function getDraftWithHash(db: Db, chartId: ChartId): Promise<Draft & { contentHash: string }> {
  const found = await findDraft(db, chartId)
  if (found === null) throw new AppError('not-found', 'There is no draft of such a chart.')
  return found
}

/** The draft of a chart. */
export async function getDraft(deps: Deps, chartId: ChartId): Promise<Draft> {
  return withoutHash(await getDraftWithHash(deps.db, chartId))
}

function withoutHash({ contentHash: _, ...draft }: Draft & { contentHash: string }): Draft {
  return draft
}

/** A new chart, as a draft of revision 1. */
export async function createChart(deps: Deps, by: CurrentSession, json: unknown): Promise<Draft> {
  const document = readDocument(json)
  const savedAt = deps.clock()
  return deps.db.transaction(async (tx) => {
    const made = await tx
      .insert(charts)
      .values({ id: document.id, title: document.title, createdAt: savedAt })
      .onConflictDoNothing()
      .returning({ id: charts.id })
    if (made.length === 0) {
      const detail = `There is a chart "${document.id}" already. Open that one, or give this another id.`
      throw new AppError('chart-exists', detail, { errors: [{ pointer: '#/document/id', detail }] })
    }
    await tx.insert(chartDrafts).values({ chartId: document.id, document, contentHash: hashContent(document), revision: 1, savedAt, savedBy: by.person.id })
    await keepRevision(tx, { chartId: document.id, revision: 1, document, savedAt, savedBy: by.person.id })
    return { chartId: document.id, revision: 1, document, savedAt: savedAt.toISOString(), savedBy: by.person.name }
  })
}

/**
 * Saves a draft over the state that `ifMatch` names. A save that is there already, because its answer got lost on the way, succeeds
 * again and changes nothing; a save over a state that is gone is refused, with the state that stands in its place.
 */
export async function saveDraft(
  deps: Deps,
  by: CurrentSession,
  { chartId, json, ifMatch }: { chartId: ChartId; json: unknown; ifMatch: string | null },
): Promise<Draft> {
  if (ifMatch === null) throw new AppError('if-match-missing', 'Say with If-Match which state of the draft was changed, as its ETag named it.')
  const document = readDocument(json)
  if (document.id !== chartId) {
    const detail = `This is the draft of "${chartId}"; the document says "${document.id}". A chart keeps its id.`
    throw new AppError('invalid-chart', detail, { errors: [{ pointer: '#/document/id', detail }] })
  }
  const contentHash = hashContent(document)
  const current = await getDraftWithHash(deps.db, chartId)
  if (current.contentHash === contentHash) return withoutHash(current)
  const expected = /^"r(\d{1,9})"$/.exec(ifMatch)?.[1]
  const saved = expected === undefined ? null : await replaceDraft(deps, by, { chartId, document, contentHash, expected: Number(expected) })
  if (saved !== null) return saved
  const winner = await getDraftWithHash(deps.db, chartId)
  if (winner.contentHash === contentHash) return withoutHash(winner)
  throw movedOn(winner)
}

type Replacement = { chartId: ChartId; document: ChartDocument; contentHash: string; expected: number }

/** Null when somebody else saved first: the condition stands in the statement. */
function replaceDraft(deps: Deps, by: CurrentSession, { chartId, document, contentHash, expected }: Replacement): Promise<Draft | null> {
  const savedAt = deps.clock()
  return deps.db.transaction(async (tx) => {
    const [saved] = await tx
      .update(chartDrafts)
      .set({ document, contentHash, revision: sql`${chartDrafts.revision} + 1`, savedAt, savedBy: by.person.id })
      .where(and(eq(chartDrafts.chartId, chartId), eq(chartDrafts.revision, expected)))
      .returning({ revision: chartDrafts.revision })
    if (saved === undefined) return null
    await keepRevision(tx, { chartId, revision: saved.revision, document, savedAt, savedBy: by.person.id })
    await tx
      .update(charts)
      .set({ title: document.title })
      .where(and(eq(charts.id, chartId), sql`${charts.version} is null`))
    return { chartId, revision: saved.revision, document, savedAt: savedAt.toISOString(), savedBy: by.person.name }
  })
}

async function keepRevision(tx: Db, row: typeof chartDraftRevisions.$inferInsert): Promise<void> {
  await tx.insert(chartDraftRevisions).values(row)
  await tx.delete(chartDraftRevisions).where(and(eq(chartDraftRevisions.chartId, row.chartId), lte(chartDraftRevisions.revision, row.revision - revisionsKept)))
}

/** The refusal of a change to a state that is gone; it carries the state that stands there now. */
export function movedOn(current: Draft & { contentHash?: string }): AppError {
  const { contentHash: _, ...draft } = current
  return new AppError(
    'draft-moved-on',
    `${draft.savedBy} saved this draft since you opened it. Nothing of yours was overwritten or lost: compare the two, then save again.`,
    {
      members: { current: draft },
    },
  )
}
