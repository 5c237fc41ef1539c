import { asc, desc, eq, sql, type SQL } from 'drizzle-orm'
import type { Symptom } from '#shared/api/charts.ts'
import type { ChartDocument } from '#shared/chart/document.ts'
import type { Db } from '#server/db/client.ts'
import { chartSymptoms } from '#server/db/schema/charts.ts'
import type { Deps } from '#server/lib/deps.ts'

const mostFound = 50
/** From this likeness on (shared groups of three letters, 0 to 1) words count as mistyped and not as other words. */
const likeEnough = 0.45

/** How text is compared: without accents, in lower case, and without the apostrophes that half of all people leave out. */
const toPlain = (text: SQL | string) => sql`lower(unaccent(translate(${text}, '''’‘', '')))`
const toVector = (text: string, weight: 'A' | 'B') => sql`setweight(to_tsvector('english', ${toPlain(text)}), ${sql.raw(`'${weight}'`)})`

/** Writes the rows by which the starts of a new version are found; those of the version before go. */
export async function writeSymptoms(tx: Db, chart: ChartDocument, version: number): Promise<void> {
  await tx.delete(chartSymptoms).where(eq(chartSymptoms.chartId, chart.id))
  const words = chart.searchWords ?? []
  const rows = chart.nodes.flatMap((node) => {
    if (node.kind !== 'start') return []
    const title = node.title ?? chart.title
    return {
      chartId: chart.id,
      startId: node.id,
      version,
      title,
      chartTitle: chart.title,
      classes: chart.appliesTo?.classes ?? [],
      engines: chart.appliesTo?.engines ?? [],
      words,
      plain: toPlain([title, chart.title, ...words].join(' · ')) as unknown as string,
      search: sql`${toVector(title, 'A')} || ${toVector(words.join(' · '), 'A')} || ${toVector(chart.title, 'B')}` as unknown as string,
    }
  })
  if (rows.length > 0) await tx.insert(chartSymptoms).values(rows)
}

/**
 * Symptoms by what somebody calls them: full text over titles and search words (any of the words finds, all of them rank higher),
 * and likeness of letters for what is mistyped. Every symptom, by title, when nothing is asked.
 */
export async function searchSymptoms(deps: Deps, asked: string): Promise<Symptom[]> {
  const question = asked.trim()
  if (question === '') {
    const rows = await deps.db
      .select()
      .from(chartSymptoms)
      .orderBy(asc(sql`lower(${chartSymptoms.title})`), asc(chartSymptoms.chartId), asc(chartSymptoms.startId))
    return rows.map((row) => toSymptom({ ...row, matched: null }))
  }
  const plain = toPlain(sql`${question}::text`)
  const allWords = sql`websearch_to_tsquery('english', ${plain})`
  const anyWord = sql`replace(replace(${allWords}::text, ' & ', ' | '), '!', '')::tsquery`
  const likeness = (text: SQL) => sql`greatest(word_similarity(${plain}, ${text}), word_similarity(${text}, ${plain}) * 0.9)`
  const titleLikeness = likeness(toPlain(sql`${chartSymptoms.title}`))
  const best = deps.db.$with('best').as(
    deps.db
      .select({
        chartId: chartSymptoms.chartId,
        version: chartSymptoms.version,
        startId: chartSymptoms.startId,
        title: chartSymptoms.title,
        chartTitle: chartSymptoms.chartTitle,
        classes: chartSymptoms.classes,
        engines: chartSymptoms.engines,
        word: sql<string | null>`(select word from unnest(${chartSymptoms.words}) as word order by ${likeness(toPlain(sql`word`))} desc, word limit 1)`.as(
          'word',
        ),
        wordLikeness: sql<number>`coalesce((select max(${likeness(toPlain(sql`word`))}) from unnest(${chartSymptoms.words}) as word), 0)`.as('word_likeness'),
        titleLikeness: sql<number>`${titleLikeness}`.as('title_likeness'),
        found: sql<boolean>`${chartSymptoms.search} @@ ${anyWord}`.as('found'),
        rank: sql<number>`ts_rank(${chartSymptoms.search}, ${allWords}) * 2 + ts_rank(${chartSymptoms.search}, ${anyWord})`.as('rank'),
      })
      .from(chartSymptoms),
  )
  const rows = await deps.db
    .with(best)
    .select()
    .from(best)
    .where(sql`${best.found} or greatest(${best.wordLikeness}, ${best.titleLikeness}) >= ${likeEnough}`)
    .orderBy(desc(sql`${best.rank} + greatest(${best.wordLikeness}, ${best.titleLikeness})`), asc(best.title), asc(best.chartId), asc(best.startId))
    .limit(mostFound)
  return rows.map((row) => toSymptom({ ...row, matched: row.wordLikeness > row.titleLikeness ? row.word : null }))
}

function toSymptom({ chartId, version, startId, title, chartTitle, matched, classes, engines }: Symptom): Symptom {
  return { chartId, version, startId, title, chartTitle, matched, classes, engines }
}
