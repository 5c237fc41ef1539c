import { useState } from 'react'

import type { ContributingChoice, ProvenPage as Page, ServiceWords } from '#shared/walk/page.ts'
import type { CauseId, ServiceItemId } from '#shared/lib/ids.ts'
import { formatNumber } from '#shared/units/format-value.ts'
import { systemWords } from '#shared/trade/systems.ts'
import { Button } from '#src/components/ui/button.tsx'
import { RuledSection } from '#src/components/ui/ruled.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { ActList } from '#src/features/walk-player/parts/act-list.tsx'
import { PageHead, Sheet } from '#src/features/walk-player/parts/page-parts.tsx'
import { TickRow } from '#src/features/walk-player/parts/tick-row.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { formatMinutes } from '#src/lib/format.ts'
import { toLineWords } from '#src/lib/walk-words.ts'

/** The cause is proven: the fix, what led to it, what else the machine needs on the way out. */
export function ProvenPage({ page }: { readonly page: Page }) {
  const { cause, fix, contributing, service, serviceChoices } = page
  const found = useProof()
  return (
    <Sheet
      what={
        <>
          <PageHead
            knot="cause"
            over={['Proven', cause.system === null ? null : systemWords[cause.system]]}
            title={cause.title}
            tab={`Proven: ${cause.title}`}
          />
          <p className="mt-2 flex flex-wrap gap-x-4">
            <StateMark state="good">{found === null ? 'proven by a second look' : `proven: ${found}`}</StateMark>
            {cause.isUnsafe && <StateMark state="bad">not safe to use until it is put right</StateMark>}
          </p>
          <FixList fix={fix} />
          <ServiceList service={service} choices={serviceChoices} />
        </>
      }
      answers={
        <div className="grid gap-6">
          <ContributingList contributing={contributing} />
          <RepairActs page={page} />
        </div>
      }
    />
  )
}

/** What the proof found, in words; `null` where a second look proved it. */
function useProof(): string | null {
  const { walk, charts, format } = usePlayer()
  const proof = walk.phase === 'proven' ? walk.cause.proof : null
  const line = proof?.by === 'finding' ? walk.trail.find(({ eventId }) => eventId === proof.eventId) : undefined
  return line === undefined ? null : toLineWords({ charts, walk, format }, line).found
}

function FixList({ fix }: { readonly fix: Page['fix'] }) {
  const { format, record } = usePlayer()
  return (
    <RuledSection
      title="The fix"
      aside={fix?.minutes == null ? undefined : <span className="figures text-small">{formatMinutes(fix.minutes)}</span>}
      className="mt-6"
    >
      {fix === null ? (
        <p className="py-3 text-ink-2">The chart knows no fix for this. Do what the maker’s manual says, and note it.</p>
      ) : (
        <ul role="list">
          {fix.items.map(({ id, title, quantity, isTicked }) => (
            <TickRow
              key={id}
              title={title}
              {...(quantity === null ? {} : { words: `part, ${formatNumber(quantity, format)}\u00a0×` })}
              isOn={isTicked}
              onToggle={(on) => record([{ type: 'ticked', payload: { list: 'fix', id, on } }])}
            />
          ))}
        </ul>
      )}
    </RuledSection>
  )
}

/** Dirty or worn, but not the cause: done on the way out. */
export function ServiceList({ service, choices = [] }: { readonly service: readonly ServiceWords[]; readonly choices?: Page['serviceChoices'] }) {
  const { record, tap } = usePlayer()
  if (service.length + choices.length === 0) return null
  const change = (added: readonly ServiceItemId[], dropped: readonly ServiceItemId[]): void => {
    record([{ type: 'service-changed', payload: { added: [...added], dropped: [...dropped] } }])
  }
  return (
    <RuledSection title="Service on the way out" className="mt-6">
      {service.length === 0 && <p className="py-3 text-ink-2">Nothing so far.</p>}
      <ul role="list">
        {service.map(({ serviceItemId, title, minutes, isTicked, byHand }) => (
          <TickRow
            key={serviceItemId}
            title={title}
            words={[minutes === null ? null : formatMinutes(minutes), byHand ? 'added by hand' : null].filter(Boolean).join(' · ') || undefined}
            isOn={isTicked}
            onToggle={(on) => record([{ type: 'ticked', payload: { list: 'service', id: serviceItemId, on } }])}
            end={
              choices.length > 0 || byHand ? (
                <Button look="plain" className="self-center text-small" onClick={() => tap(() => change([], [serviceItemId]))}>
                  Leave out
                </Button>
              ) : undefined
            }
          />
        ))}
      </ul>
      {choices.length > 0 && (
        <details>
          <summary className="flex min-h-14 items-center font-medium text-cord underline underline-offset-4">Add to the list</summary>
          <ul role="list" className="border-t border-hair">
            {choices.map(({ serviceItemId, title }) => (
              <li key={serviceItemId} className="border-b border-hair">
                <button
                  type="button"
                  onClick={() => tap(() => change([serviceItemId], []))}
                  className="flex min-h-14 w-full items-center gap-3 text-left hover:bg-cord-wash"
                >
                  <span aria-hidden="true" className="figures w-8 text-center text-cord">
                    +
                  </span>
                  {title}
                </button>
              </li>
            ))}
          </ul>
        </details>
      )}
    </RuledSection>
  )
}

/** Why it happened; the advice goes on the hand-back report. */
function ContributingList({ contributing }: { readonly contributing: readonly ContributingChoice[] }) {
  const { record } = usePlayer()
  if (contributing.length === 0) return null
  const toggle = (causeId: CauseId, on: boolean): void => {
    const others = contributing.filter((choice) => choice.isSet && choice.causeId !== causeId).map((choice) => choice.causeId)
    record([{ type: 'contributing-set', payload: { causeIds: on ? [...others, causeId] : others } }])
  }
  return (
    <RuledSection title="What led to it">
      <ul role="list">
        {contributing.map(({ causeId, title, advice, isSet }) => (
          <TickRow
            key={causeId}
            title={title}
            words={isSet && advice !== null ? `On the report: ${advice}` : undefined}
            isOn={isSet}
            onToggle={(on) => toggle(causeId, on)}
          />
        ))}
      </ul>
    </RuledSection>
  )
}

function RepairActs({ page }: { readonly page: Page }) {
  const { record, openPanel } = usePlayer()
  const { fix, service, cause } = page
  const planned = (fix?.minutes ?? 0) + service.filter(({ isTicked }) => isTicked).reduce((sum, { minutes }) => sum + (minutes ?? 0), 0)
  const [own, setOwn] = useState<number | null>(null)
  const minutes = own ?? planned
  const unticked = (fix?.items ?? []).filter(({ isTicked }) => !isTicked).length
  const done = (): void => {
    record(
      [
        {
          type: 'repair-done',
          payload: {
            serviceDone: service.filter(({ isTicked }) => isTicked).map(({ serviceItemId }) => serviceItemId),
            partsUsed: (fix?.items ?? []).flatMap(({ title, quantity, isTicked }) => (isTicked && quantity !== null ? [{ title, quantity }] : [])),
            minutes,
          },
        },
      ],
      'Fix done. Next: the hand-back run.',
    )
  }
  return (
    <div className="grid gap-4">
      <MinutesStepper minutes={minutes} onChange={setOwn} />
      <ActList
        label="Go on"
        acts={[
          { key: 'done', title: 'Fix done', words: `${unticked === 0 ? '' : `${unticked} of the fix not ticked · `}on to the hand-back run, with no way back`, look: 'leading', onPress: done },
          page.canCloseUnrepaired
            ? {
                key: 'not',
                title: 'Not going to be repaired',
                words: 'close with the cause on record',
                onPress: () => record([{ type: 'closed', payload: { result: 'not-repaired' } }], 'Closed: not repaired.'),
              }
            : { key: 'hold', title: 'Not going to be repaired', words: `hold it: ${cause.title.toLowerCase()} is not safe`, onPress: () => openPanel('hold') },
        ]}
      />
    </div>
  )
}

const minuteStep = 5

/** Bench minutes that the fix took: the chart's to begin with, five up or down with a thumb. */
function MinutesStepper({ minutes, onChange }: { readonly minutes: number; readonly onChange: (minutes: number) => void }) {
  return (
    <div role="group" aria-label="Minutes it took" className="flex items-center justify-between gap-3 border-y border-hair py-2">
      <span className="label">Minutes it took</span>
      <span className="flex items-center gap-3">
        <Button aria-label="Five minutes less" onClick={() => onChange(Math.max(0, minutes - minuteStep))} className="figures min-w-14 px-0!">
          −5
        </Button>
        <span aria-live="polite" className="figures min-w-20 text-center text-[1.5rem]">
          {Math.round(minutes)}
        </span>
        <Button aria-label="Five minutes more" onClick={() => onChange(minutes + minuteStep)} className="figures min-w-14 px-0!">
          +5
        </Button>
      </span>
    </div>
  )
}
