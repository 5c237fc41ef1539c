import { useQuery, useQueryClient } from '@tanstack/react-query'
import { useState } from 'react'

import type { Symptom } from '#shared/api/charts.ts'
import type { ChartId, NodeId } from '#shared/lib/ids.ts'
import { splitPlace } from '#shared/lib/ids.ts'
import type { PickPage as Page } from '#shared/walk/page.ts'
import type { Pins } from '#shared/walk/pinned-charts.ts'
import { chartQueries } from '#src/api/charts.ts'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { ActList } from '#src/features/walk-player/parts/act-list.tsx'
import { PageHead, Sheet } from '#src/features/walk-player/parts/page-parts.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { toWords } from '#src/lib/problem-words.ts'

type Choice = { readonly chartId: ChartId; readonly startId: NodeId; readonly title: string; readonly chartTitle: string; readonly fits: boolean }

/** It does something else: the person says what, and the walk goes on in that chart. */
export function PickPage({ page }: { readonly page: Page }) {
  const { walk, record, learn } = usePlayer()
  const client = useQueryClient()
  const symptoms = useQuery(chartQueries.symptoms(''))
  const [problem, setProblem] = useState<string | null>(null)
  const pinnedVersions = new Map(page.starts.map(({ chartId, version }) => [chartId, version]))

  const pick = async ({ chartId, startId, title }: Choice): Promise<void> => {
    setProblem(null)
    const pinned = pinnedVersions.get(chartId)
    try {
      const found = pinned === undefined ? (await client.fetchQuery(chartQueries.reach(chartId))).charts : []
      const version = pinned ?? found.find((chart) => chart.chartId === chartId)?.version
      if (version === undefined) return
      // Charts that the walk goes by already stay as they are.
      const pins = Object.fromEntries(found.filter((chart) => !Object.hasOwn(walk.pins, chart.chartId)).map((chart) => [chart.chartId, chart.version])) as Pins
      if (found.length > 0) learn(found)
      record([{ type: 'jumped', payload: { chartId, version, startId, pins } }], `Picked: ${title}`)
    } catch (error) {
      setProblem(toWords(error))
    }
  }

  const choices = toChoices(page, symptoms.data?.symptoms ?? [], walk)
  return (
    <Sheet
      what={
        <>
          <PageHead knot="jump" over={['Something else']} title={page.node.title} />
          <p className="mt-3">What was found so far stays on record.</p>
          {problem !== null && (
            <Notice state="care" title="Not picked yet" role="alert" className="mt-4">
              {problem}
            </Notice>
          )}
          {symptoms.error !== null && <p className="mt-4 text-small text-ink-2">The shop’s other charts can’t be read now: {toWords(symptoms.error)}</p>}
        </>
      }
      answers={
        symptoms.isPending ? (
          <Placeholder words="Reading the list of symptoms" />
        ) : (
          <ActList
            label={page.node.title}
            acts={choices.map((choice) => ({
              key: `${choice.chartId}/${choice.startId}`,
              title: choice.title,
              ...(choice.title === choice.chartTitle && choice.fits
                ? {}
                : {
                    words: [choice.title === choice.chartTitle ? null : choice.chartTitle, choice.fits ? null : 'written for other machines']
                      .filter(Boolean)
                      .join(' · '),
                  }),
              onPress: () => void pick(choice),
            }))}
          />
        )
      }
    />
  )
}

/** Starts of the charts that the walk holds, then the shop's others; where it came from is left out, and what fits the machine comes first. */
function toChoices(page: Page, symptoms: readonly Symptom[], walk: ReturnType<typeof usePlayer>['walk']): Choice[] {
  const here = splitPlace(walk.start)
  const fitsMachine = (symptom: Symptom | undefined): boolean =>
    symptom === undefined ||
    ((symptom.classes.length === 0 || symptom.classes.includes(walk.machine.class)) &&
      (symptom.engines.length === 0 || symptom.engines.includes(walk.machine.engine)))
  const known = new Set(page.starts.map(({ chartId }) => chartId))
  const pinned = page.starts.map(({ chartId, startId, title, chartTitle }) => ({
    chartId,
    startId,
    title,
    chartTitle,
    fits: fitsMachine(symptoms.find((symptom) => symptom.chartId === chartId && symptom.startId === startId)),
  }))
  const others = symptoms
    .filter(({ chartId }) => !known.has(chartId))
    .map((symptom) => ({
      chartId: symptom.chartId,
      startId: symptom.startId,
      title: symptom.title,
      chartTitle: symptom.chartTitle,
      fits: fitsMachine(symptom),
    }))
  return [...pinned, ...others]
    .filter(({ chartId, startId }) => chartId !== here.chartId || startId !== here.nodeId)
    .toSorted((left, right) => Number(right.fits) - Number(left.fits))
    .slice(0, 20)
}
