import { useQuery } from '@tanstack/react-query'
import { useSearchParams } from 'react-router-dom'

import type { SignedIn } from '#shared/api/session.ts'
import type { WalkRow } from '#shared/api/walks.ts'
import { hasRole } from '#shared/trade/roles.ts'
import { walkQueries } from '#src/api/walks.ts'
import { Button } from '#src/components/ui/button.tsx'
import { EmptyState } from '#src/components/ui/empty-state.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import type { RuledColumn } from '#src/components/ui/ruled.tsx'
import { RuledTable } from '#src/components/ui/ruled.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { downloadCsv, toCsv } from '#src/lib/csv.ts'
import { formatMinutes, formatMoment } from '#src/lib/format.ts'
import { paths } from '#src/lib/paths.ts'
import { toWords } from '#src/lib/problem-words.ts'

const scopes = [
  { value: 'mine', words: 'My own' },
  { value: 'shop', words: 'The shop’s' },
] as const
const states = [
  { value: 'open', words: 'Open' },
  { value: 'ended', words: 'Ended' },
  { value: 'all', words: 'All' },
] as const

/** What of the list is shown; it stands in the address, so that a link shows the same. */
function useFilter(person: SignedIn) {
  const [params, setParams] = useSearchParams()
  const scope = hasRole(person.role, 'lead') ? (scopes.find(({ value }) => value === params.get('scope'))?.value ?? 'shop') : 'mine'
  const state = states.find(({ value }) => value === params.get('state'))?.value ?? 'all'
  const page = Math.max(1, Math.floor(Number(params.get('page') ?? '1')) || 1)
  const set = (change: Readonly<Record<string, string>>): void => setParams({ scope, state, ...change }, { replace: true })
  return { scope, state, page, set }
}

/** Every walk, newest first: a lead reads the shop's, a junior their own. */
export function WalksPage({ person }: { readonly person: SignedIn }) {
  const { scope, state, page, set } = useFilter(person)
  const { data, error, isPending } = useQuery(walkQueries.list({ scope, state, page }))
  return (
    <div className="max-w-sheet pt-6">
      <div data-screen-only className="flex flex-wrap items-center justify-between gap-x-8 gap-y-3 pb-4">
        <div className="flex flex-wrap gap-x-8 gap-y-3">
          {hasRole(person.role, 'lead') && <Filter label="Whose" choices={scopes} value={scope} onPick={(value) => set({ scope: value })} />}
          <Filter label="State" choices={states} value={state} onPick={(value) => set({ state: value })} />
        </div>
        <div className="flex gap-x-1">
          <Button look="plain" onClick={() => window.print()}>
            Print
          </Button>
          <Button look="plain" aria-disabled={data === undefined} onClick={() => data !== undefined && saveCsv(data.walks)}>
            CSV
          </Button>
        </div>
      </div>
      {isPending && <Placeholder words="Reading the walks" rows={6} />}
      {error !== null && (
        <Notice state="bad" title="The walks could not be read" className="mt-2">
          {toWords(error)}
        </Notice>
      )}
      {data !== undefined && data.walks.length === 0 && (
        <EmptyState title="No walks here" act={<TextLink to={paths.bench()}>Start one at the bench</TextLink>}>
          A walk is one machine taken through a chart. It stands here from its start on.
        </EmptyState>
      )}
      {data !== undefined && data.walks.length > 0 && <RuledTable caption="Walks, newest first" columns={columns} rows={data.walks} rowKey={({ id }) => id} />}
      {data !== undefined && (page > 1 || data.hasMore) && (
        <nav aria-label="Pages" data-screen-only className="flex items-center gap-4 pt-4">
          <Button disabled={page === 1} onClick={() => set({ page: String(page - 1) })}>
            Newer
          </Button>
          <span className="text-small text-ink-2">Page {page}</span>
          <Button disabled={!data.hasMore} onClick={() => set({ page: String(page + 1) })}>
            Older
          </Button>
        </nav>
      )}
    </div>
  )
}

const columns: readonly RuledColumn<WalkRow>[] = [
  { key: 'machine', head: 'Machine', isRowHead: true, cell: ({ id, machineTitle }) => <TextLink to={paths.walkReview(id)}>{machineTitle}</TextLink> },
  { key: 'symptom', head: 'Symptom', cell: ({ chartTitle, version }) => `${chartTitle}, v${version}` },
  {
    key: 'stands',
    head: 'Where it stands',
    cell: ({ causeTitle, standsAt, isPaused, hasQuestion }) =>
      [isPaused ? 'paused' : null, hasQuestion ? 'asked the lead' : null, causeTitle ?? standsAt].filter(Boolean).join(' · '),
  },
  { key: 'person', head: 'Walked by', cell: ({ startedBy }) => startedBy.name },
  { key: 'started', head: 'Started', cell: ({ startedAt }) => <span className="whitespace-nowrap">{formatMoment(startedAt)}</span> },
  {
    key: 'minutes',
    head: 'Minutes',
    align: 'right',
    cell: ({ minutesUsed }) => <span className="figures whitespace-nowrap">{formatMinutes(minutesUsed)}</span>,
  },
]

function saveCsv(walks: readonly WalkRow[]): void {
  const head = ['walk', 'machine', 'class', 'engine', 'chart', 'version', 'phase', 'stands at', 'cause', 'minutes', 'walked by', 'started', 'last entry']
  const rows = walks.map((walk) => [
    walk.id,
    walk.machineTitle,
    walk.machine.class,
    walk.machine.engine,
    walk.chartTitle,
    walk.version,
    walk.phase,
    walk.standsAt,
    walk.causeTitle,
    walk.minutesUsed,
    walk.startedBy.name,
    walk.startedAt,
    walk.lastEventAt,
  ])
  downloadCsv('walks.csv', toCsv(head, rows))
}

type FilterProps<Value extends string> = {
  readonly label: string
  readonly choices: readonly { readonly value: Value; readonly words: string }[]
  readonly value: Value
  readonly onPick: (value: Value) => void
}

function Filter<Value extends string>({ label, choices, value, onPick }: FilterProps<Value>) {
  return (
    <div role="group" aria-label={label} className="flex items-center gap-1">
      <span aria-hidden="true" className="label mr-1">
        {label}
      </span>
      {choices.map((choice) => (
        <button
          key={choice.value}
          type="button"
          aria-pressed={choice.value === value}
          onClick={() => onPick(choice.value)}
          className="min-h-(--control) border-y-3 border-transparent px-2 font-medium text-ink-2 hover:text-ink aria-pressed:border-b-cord aria-pressed:text-ink"
        >
          {choice.words}
        </button>
      ))}
    </div>
  )
}
