import { useQueryClient } from '@tanstack/react-query'
import { useMemo, useState } from 'react'

import type { SignedIn } from '#shared/api/session.ts'
import { isDecision } from '#shared/chart/graph.ts'
import { splitPlace, type PersonId, type Place } from '#shared/lib/ids.ts'
import { hasRole } from '#shared/trade/roles.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import { chartOf } from '#shared/walk/pinned-charts.ts'
import type { ReviewLine } from '#shared/walk/review.ts'
import { toReview } from '#shared/walk/review.ts'
import { isOpen, type StartedWalk } from '#shared/walk/state.ts'
import { nameAt } from '#shared/walk/words.ts'
import type { PlayerRules, WalkDetail } from '#src/api/walk-logs.ts'
import { toRules } from '#src/api/walk-logs.ts'
import { answerQuestion, walkQueries } from '#src/api/walks.ts'
import { Button, ButtonLink } from '#src/components/ui/button.tsx'
import { Checkbox } from '#src/components/ui/field.tsx'
import { AnswerQuestion } from '#src/features/walk-review/answer-question.tsx'
import { isMinor, toLogCsv } from '#src/features/walk-review/log-lines.ts'
import { RoutePicture } from '#src/features/walk-review/route-picture.tsx'
import { SideEvents } from '#src/features/walk-review/side-events.tsx'
import { lineOfPlace, WalkLogList } from '#src/features/walk-review/walk-log-list.tsx'
import { downloadCsv, toCsv } from '#src/lib/csv.ts'
import { formatMinutes, formatMoment, formatSeconds } from '#src/lib/format.ts'
import { paths } from '#src/lib/paths.ts'
import { resultWords } from '#src/lib/walk-words.ts'

type WalkReviewProps = { readonly detail: WalkDetail; readonly person: SignedIn; readonly format: NumberFormat }

/** A walk as a lead reads it: the log on the left, its way through the chart on the right; what is chosen in one shows in the other. */
export function WalkReview({ detail, person, format }: WalkReviewProps) {
  const rules = useMemo(() => toRules(detail.charts, person), [detail.charts, person])
  const state = useMemo(() => rules.replay(detail.events), [rules, detail.events])
  const lines = useMemo(() => toLines(rules, detail), [rules, detail])
  if (state.phase === 'new') return <p className="pt-6">This walk has no beginning: its log does not start with a start.</p>
  return <Review detail={detail} person={person} format={format} rules={rules} walk={state} lines={lines} />
}

/** The story of the walk; a step back is told at the check that it went back to. */
function toLines(rules: PlayerRules, { events }: WalkDetail): readonly ReviewLine[] {
  const lines = toReview(rules.charts, events)
  const wentTo = new Map(events.flatMap((event) => (event.type === 'stepped-back' ? [[event.id, event.payload.toEventId] as const] : [])))
  return lines.map((line) => {
    const target = lines.find(({ eventId }) => eventId === wentTo.get(line.eventId))
    return target === undefined ? line : { ...line, node: target.node }
  })
}

type ReviewProps = WalkReviewProps & { readonly rules: PlayerRules; readonly walk: StartedWalk; readonly lines: readonly ReviewLine[] }

function Review({ detail, person, format, rules, walk, lines }: ReviewProps) {
  const { charts } = rules
  const [selected, setSelected] = useState<ReviewLine | null>(null)
  const [node, setNode] = useState<Place | null>(null)
  const [chartId, setChartId] = useState(() => splitPlace(walk.node).chartId)
  const [isWhole, setWhole] = useState(false)
  const nameOf = (personId: PersonId): string => detail.people[personId] ?? 'somebody else'
  const shown = isWhole ? lines : lines.filter((line) => !isMinor(line))

  const selectLine = (line: ReviewLine): void => {
    setSelected(line)
    setNode(line.node.place)
    setChartId(line.node.chartId)
  }
  const selectNode = (place: Place): void => {
    setNode(place)
    setSelected(lineOfPlace(shown, place))
  }
  return (
    <div className="-mr-(--page-edge) lg:grid lg:grid-cols-[minmax(0,1fr)_minmax(0,1fr)] print:mr-0 print:block">
      <div className="max-w-[52rem] pr-(--page-edge) pb-10">
        <p className="hidden pb-4 font-semibold print:block">
          {detail.walk.machineTitle} · {detail.walk.chartTitle}, version {detail.walk.version}
        </p>
        <ReviewBar detail={detail} walk={walk} lines={lines} nameOf={nameOf} person={person} />
        <ReviewHead detail={detail} walk={walk} nameOf={nameOf} />
        <Questions detail={detail} walk={walk} rules={rules} person={person} nameOf={nameOf} />
        <div className="mt-4">
          <WalkLogList lines={shown} format={format} nameOf={nameOf} walker={walk.startedBy} selected={selected?.eventId ?? null} onSelect={selectLine} />
        </div>
        <div data-screen-only className="mt-2">
          <Checkbox label="Cautions, ticks and pauses too" checked={isWhole} onChange={(event) => setWhole(event.target.checked)} />
        </div>
        <SideEvents walkId={walk.walkId} charts={charts} walk={walk} format={format} nameOf={nameOf} />
        <p className="mt-6 text-small text-ink-2">The maker’s manual, local codes and licensed practice come first.</p>
      </div>
      <aside
        aria-label="Way on the chart"
        className="border-rule bg-well max-lg:border-t lg:sticky lg:top-0 lg:flex lg:h-dvh lg:flex-col lg:border-l print:mt-6 print:break-before-page print:border-0"
      >
        <RoutePicture
          walk={walk}
          charts={charts}
          versions={detail.charts}
          format={format}
          selected={node}
          onSelect={selectNode}
          chartId={chartId}
          onChart={setChartId}
        />
      </aside>
    </div>
  )
}

type Named = { readonly nameOf: (personId: PersonId) => string }

/** What can be done with the review. */
function ReviewBar({
  detail,
  walk,
  lines,
  nameOf,
  person,
}: Named & { readonly detail: WalkDetail; readonly walk: StartedWalk; readonly lines: readonly ReviewLine[]; readonly person: SignedIn }) {
  const save = (): void => {
    const { head, rows } = toLogCsv(lines, nameOf)
    downloadCsv(`walk-${walk.startedAt.slice(0, 10)}-${walk.walkId.slice(0, 8)}.csv`, toCsv(head, rows))
  }
  const isMine = walk.holder.personId === person.id || walk.handedTo === person.id
  return (
    <div data-screen-only className="flex flex-wrap items-center justify-between gap-x-6 gap-y-2 border-b border-hair py-2">
      <p className="label">
        {detail.walk.chartTitle} · v{detail.walk.version}
      </p>
      <div className="flex flex-wrap items-center gap-x-1">
        <Button look="plain" onClick={() => window.print()}>
          Print
        </Button>
        <Button look="plain" onClick={save}>
          CSV
        </Button>
        {isOpen(walk) && (isMine || hasRole(person.role, 'lead')) && (
          <ButtonLink to={paths.walk(walk.walkId)} className="ml-2">
            {isMine ? 'Go on' : 'Take it over'}
          </ButtonLink>
        )}
      </div>
    </div>
  )
}

function ReviewHead({ detail, walk, nameOf }: Named & { readonly detail: WalkDetail; readonly walk: StartedWalk }) {
  const { over, title } = toOutcome(detail, walk)
  return (
    <div className="grid grid-cols-[minmax(0,1fr)_auto_auto] items-end gap-x-8 gap-y-2 border-b-3 border-ink pt-5 pb-3 max-sm:grid-cols-2">
      <div className="max-sm:col-span-2">
        <p className="label">{over}</p>
        <p className="title">{title}</p>
      </div>
      <div>
        <p className="label">Bench time</p>
        <p className="figures text-[1.25rem] leading-7 whitespace-nowrap" title={`${formatSeconds(walk.secondsMeasured)} measured`}>
          {formatMinutes(walk.minutesUsed)}
        </p>
      </div>
      <div>
        <p className="label">Walked by</p>
        <p className="text-[1.125rem] leading-7">{nameOf(walk.startedBy)}</p>
      </div>
      <p className="col-span-full text-small text-ink-2">
        {formatMoment(walk.startedAt)} · {formatSeconds(walk.secondsMeasured)} measured
        {walk.waitMinutes > 0 ? ` · ${formatMinutes(walk.waitMinutes)} of waiting by the chart` : ''}
        {walk.machine.serial === undefined ? '' : ` · serial number ${walk.machine.serial}`}
      </p>
    </div>
  )
}

/** What the walk came to, or where it stands. */
function toOutcome({ walk: row }: WalkDetail, walk: StartedWalk): { readonly over: string; readonly title: string } {
  if (walk.phase === 'closed')
    return row.causeTitle === null ? { over: 'Closed', title: resultWords[walk.result] } : { over: resultWords[walk.result], title: row.causeTitle }
  if (walk.phase === 'abandoned') return { over: 'Given up', title: walk.why }
  if (row.causeTitle !== null) return { over: 'Proven', title: row.causeTitle }
  return { over: walk.isPaused ? 'Paused' : 'Open', title: row.standsAt }
}

type QuestionsProps = Named & { readonly detail: WalkDetail; readonly walk: StartedWalk; readonly rules: PlayerRules; readonly person: SignedIn }

/** Questions that wait: a lead answers them here. */
function Questions({ walk, rules, person, nameOf }: QuestionsProps) {
  const client = useQueryClient()
  const open = isOpen(walk) ? walk.questions.filter(({ answer }) => answer === null) : []
  if (open.length === 0 || !hasRole(person.role, 'lead')) return null
  const canGo = walk.phase === 'at-node' || walk.phase === 'at-cause' || walk.phase === 'escalated'
  const here = chartOf(rules.charts, walk.pins, splitPlace(walk.node).chartId)
  const goTos =
    canGo && here !== null
      ? here.chart.nodes.filter((node) => isDecision(node) || node.kind === 'step').map((node) => toGoTo(rules, walk, `${here.id}/${node.id}` as Place))
      : []
  return open.map((question) => (
    <AnswerQuestion
      key={question.questionId}
      question={question}
      askedBy={nameOf(question.askedBy)}
      at={toGoTo(rules, walk, question.node).words}
      goTos={goTos}
      onAnswer={async (text, goTo) => {
        await answerQuestion(walk.walkId, person, { questionId: question.questionId, text, photoIds: [], ...(goTo === null ? {} : { goTo }) })
        await client.invalidateQueries({ queryKey: walkQueries.detail(walk.walkId).queryKey })
        await client.invalidateQueries({ queryKey: walkQueries.lists() })
      }}
    />
  ))
}

function toGoTo({ charts }: PlayerRules, walk: StartedWalk, place: Place): { readonly place: Place; readonly words: string } {
  const { number, title } = nameAt(charts, walk, place)
  return { place, words: number === '' ? title : `${number} ${title}` }
}
