import { useQuery } from '@tanstack/react-query'
import { useDeferredValue, useState } from 'react'

import type { SignedIn } from '#shared/api/session.ts'
import { hasRole } from '#shared/trade/roles.ts'
import { chartQueries } from '#src/api/charts.ts'
import { walkQueries } from '#src/api/walks.ts'
import { EmptyState } from '#src/components/ui/empty-state.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { RuledSection } from '#src/components/ui/ruled.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { SymptomList } from '#src/features/bench/symptom-list.tsx'
import { SymptomSearch } from '#src/features/bench/symptom-search.tsx'
import { ClosedWalkRow, OpenWalkRow, WalkRows } from '#src/features/bench/walk-rows.tsx'
import { paths } from '#src/lib/paths.ts'
import { toWords } from '#src/lib/problem-words.ts'

/** How many closed walks the bench still shows; the rest stand in the list of walks. */
const closedShown = 5

/** Home of everybody at the bench: what does it do, what is open, start. */
export function BenchPage({ person }: { readonly person: SignedIn }) {
  const [words, setWords] = useState('')
  const asked = useDeferredValue(words.trim())
  const isSearching = words.trim() !== ''
  const isLead = hasRole(person.role, 'lead')
  return (
    <div className="mx-auto grid w-full max-w-sheet gap-8 pt-5 md:pt-8">
      <SymptomSearch words={words} onWords={setWords} />
      {isSearching ? (
        <Symptoms words={asked} title={`“${words.trim()}”`} />
      ) : (
        <>
          <MyWalks />
          {isLead && <ShopWalks person={person} />}
          <Symptoms words="" title="Start without a ticket" />
          <ClosedWalks />
        </>
      )}
    </div>
  )
}

function Symptoms({ words, title }: { readonly words: string; readonly title: string }) {
  const { data, error, isPending } = useQuery(chartQueries.symptoms(words))
  return (
    <RuledSection title={title}>
      {isPending && <Placeholder words="Reading the list of symptoms" rows={2} />}
      {error !== null && (
        <Notice state="bad" title="The symptoms could not be read" className="mt-4">
          {toWords(error)}
        </Notice>
      )}
      {data !== undefined && data.symptoms.length > 0 && <SymptomList symptoms={data.symptoms} isSearch={words !== ''} />}
      {data !== undefined && data.symptoms.length === 0 && (
        <EmptyState title={words === '' ? 'No chart is on the bench yet' : 'No chart knows this'}>
          {words === ''
            ? 'The lead publishes charts; their symptoms then stand here.'
            : 'Try fewer words, or say it as the machine does it: dies, bogs, drags, won’t start.'}
        </EmptyState>
      )}
    </RuledSection>
  )
}

function MyWalks() {
  const { data, error, isPending } = useQuery(walkQueries.list({ scope: 'mine', state: 'open' }))
  return (
    <RuledSection title="My open walks">
      {isPending && <Placeholder words="Reading your walks" rows={2} />}
      {error !== null && (
        <Notice state="bad" title="Your walks could not be read" className="mt-4">
          {toWords(error)}
        </Notice>
      )}
      {data?.walks.length === 0 && <p className="py-4 text-ink-2">None. Pick what the machine does, below.</p>}
      {data !== undefined && data.walks.length > 0 && (
        <WalkRows>
          {data.walks.map((walk, index) => (
            <OpenWalkRow key={walk.id} walk={walk} isFirst={index === 0} />
          ))}
        </WalkRows>
      )}
    </RuledSection>
  )
}

/** For the lead: questions that wait, then what the others have open. */
function ShopWalks({ person }: { readonly person: SignedIn }) {
  const { data } = useQuery({ ...walkQueries.list({ scope: 'shop', state: 'open' }), refetchInterval: 30_000 })
  const walks = data?.walks ?? []
  const asked = walks.filter(({ hasQuestion }) => hasQuestion)
  const others = walks.filter((walk) => !walk.hasQuestion && walk.heldBy.personId !== person.id)
  return (
    <>
      {asked.length > 0 && (
        <RuledSection title="Questions to the lead">
          <WalkRows>
            {asked.map((walk) => (
              <OpenWalkRow key={walk.id} walk={walk} isFirst={false} as="question" />
            ))}
          </WalkRows>
        </RuledSection>
      )}
      {others.length > 0 && (
        <RuledSection title="Open in the shop">
          <WalkRows>
            {others.map((walk) => (
              <OpenWalkRow key={walk.id} walk={walk} isFirst={false} as="other" />
            ))}
          </WalkRows>
        </RuledSection>
      )}
    </>
  )
}

function ClosedWalks() {
  const { data } = useQuery(walkQueries.list({ scope: 'mine', state: 'ended' }))
  if (data === undefined || data.walks.length === 0) return null
  return (
    <RuledSection
      title="My last walks"
      aside={
        <TextLink to={`${paths.walks()}?state=ended`} className="py-1 text-small">
          All walks
        </TextLink>
      }
    >
      <WalkRows>
        {data.walks.slice(0, closedShown).map((walk) => (
          <ClosedWalkRow key={walk.id} walk={walk} />
        ))}
      </WalkRows>
    </RuledSection>
  )
}
