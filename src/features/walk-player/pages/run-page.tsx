import { useState } from 'react'
import { z } from 'zod'

import { ok } from '#shared/lib/result.ts'
import { formatValue } from '#shared/units/format-value.ts'
import { unitSchema } from '#shared/units/limits.ts'
import { readTypedValue } from '#shared/units/read-value.ts'
import { isWithin } from '#shared/walk/judging.ts'
import type { RunPage as Page, RunWords } from '#shared/walk/page.ts'
import type { RunItem } from '#shared/walk/events.ts'
import { Button } from '#src/components/ui/button.tsx'
import { RuledSection } from '#src/components/ui/ruled.tsx'
import type { MarkState } from '#src/components/ui/state-mark.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { ActList } from '#src/features/walk-player/parts/act-list.tsx'
import { NoteField, toLengthWords } from '#src/features/walk-player/parts/note-field.tsx'
import { PageHead, Sheet, toWordsOfId } from '#src/features/walk-player/parts/page-parts.tsx'
import { TickRow } from '#src/features/walk-player/parts/tick-row.tsx'
import { ValueEntry } from '#src/features/walk-player/parts/value-entry.tsx'
import { ServiceList } from '#src/features/walk-player/pages/proven-page.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useScratch } from '#src/features/walk-player/scratch.ts'
import { toCount } from '#src/features/walk-player/words.ts'

const runSchema = z.strictObject({
  values: z.record(z.string(), z.strictObject({ value: z.number(), unit: unitSchema })),
  marks: z.record(z.string(), z.enum(['failed', 'not-applicable'])),
})
type Run = z.infer<typeof runSchema>
const nothing: Run = { values: {}, marks: {} }

type Verdict = RunItem['result'] | null

/** What an item came to: failed or not there by hand, in order when it is ticked and, where it asks for a value, has one. */
function toVerdict(item: RunWords, run: Run): Verdict {
  const mark = run.marks[item.id]
  if (mark !== undefined) return mark
  return item.isTicked && (item.reading === undefined || run.values[item.id] !== undefined) ? 'ok' : null
}

/** The hand-back run: each item done, then ticked; what fails rules the cause out and the walk goes on. */
export function RunPage({ page }: { readonly page: Page }) {
  const { walk, record } = usePlayer()
  const [kept, keep] = useScratch(walk.walkId, 'run', runSchema)
  const [note, setNote] = useState('')
  const run = kept ?? nothing
  const verdicts = page.items.map((item) => ({ item, verdict: toVerdict(item, run) }))
  const failed = verdicts.filter(({ verdict }) => verdict === 'failed')
  const open = verdicts.filter(({ verdict }) => verdict === null)

  const mark = (item: RunWords, as: 'failed' | 'not-applicable' | null): void => {
    const { [item.id]: _, ...others } = run.marks
    keep({ ...run, marks: as === null ? others : { ...others, [item.id]: as } })
    if (as !== null && item.isTicked) record([{ type: 'ticked', payload: { list: 'run', id: item.id, on: false } }])
  }
  const finish = (type: 'run-passed' | 'run-failed', said: string): void => {
    const items = verdicts.flatMap(({ item, verdict }): RunItem[] => (verdict === null ? [] : [{ id: item.id, result: verdict, ...run.values[item.id] }]))
    const draft =
      type === 'run-passed'
        ? ({ type, payload: { items } } as const)
        : ({ type, payload: { items, ...(note.trim() === '' ? {} : { note: note.trim() }) } } as const)
    if (record([draft], said)) keep(null)
  }

  return (
    <Sheet
      what={
        <>
          <PageHead knot="proof" over={['Hand-back run', page.cause.title]} title="Run it, tick each thing off" tab="Hand-back run" />
          {page.defeated.length > 0 && (
            <p className="mt-3">
              <StateMark state="bad">Put back first: {page.defeated.map(toWordsOfId).join(', ')}</StateMark>
            </p>
          )}
          <ul role="list" className="mt-4 border-t border-rule">
            {page.items.map((item) => (
              <RunRow key={item.id} item={item} run={run} onKeep={keep} onMark={(as) => mark(item, as)} />
            ))}
          </ul>
        </>
      }
      answers={
        <div className="grid gap-5">
          <ServiceList service={page.service} />
          {failed.length > 0 ? (
            <RuledSection title="What failed">
              <div className="grid gap-4 pt-3">
                <p>{failed.map(({ item }) => item.title).join(', ')}</p>
                <NoteField label="What it did (may stay empty)" value={note} onChange={setNote} rows={2} />
                <ActList
                  label="The run failed"
                  acts={[
                    {
                      key: 'failed',
                      title: 'The run failed',
                      words: `rules out: ${page.cause.title.toLowerCase()}. The walk goes on.`,
                      look: 'leading',
                      disabled: toLengthWords(note) !== undefined,
                      onPress: () => finish('run-failed', `Ruled out: ${page.cause.title}.`),
                    },
                  ]}
                />
              </div>
            </RuledSection>
          ) : (
            <ActList
              label="The run"
              acts={[
                {
                  key: 'passed',
                  title: 'It runs right',
                  words: open.length === 0 ? 'every item in order' : `${toCount(open.length, 'item', 'items')} still open`,
                  look: open.length === 0 ? 'leading' : 'plain',
                  disabled: open.length > 0,
                  onPress: () => finish('run-passed', 'The run is passed.'),
                },
              ]}
            />
          )}
        </div>
      }
    />
  )
}

type RunRowProps = {
  readonly item: RunWords
  readonly run: Run
  readonly onKeep: (run: Run) => void
  readonly onMark: (as: 'failed' | 'not-applicable' | null) => void
}

function RunRow({ item, run, onKeep, onMark }: RunRowProps) {
  const { format, record } = usePlayer()
  const [isEntering, setEntering] = useState(false)
  const [isOther, setOther] = useState(false)
  const mark = run.marks[item.id]
  const value = run.values[item.id]
  const tick = (on: boolean): void => {
    onMark(null)
    record([{ type: 'ticked', payload: { list: 'run', id: item.id, on } }])
  }
  const toggle = (on: boolean): void => {
    if (item.reading !== undefined && on && value === undefined) setEntering(true)
    else tick(on)
  }
  const title = value === undefined ? item.title : `${item.title}: ${formatValue(value.value, value.unit, format)}`
  return (
    <>
      <TickRow
        title={title}
        words={item.how}
        isOn={mark === undefined && item.isTicked}
        onToggle={toggle}
        end={
          mark === undefined ? (
            <Button look="plain" className="self-center text-small" aria-expanded={isOther} onClick={() => setOther((open) => !open)}>
              Not OK
            </Button>
          ) : (
            <span className="flex items-center gap-2">
              <StateMark state={mark === 'failed' ? 'bad' : 'open'} className="text-small">
                {mark === 'failed' ? 'failed' : 'not on it'}
              </StateMark>
              <Button look="plain" className="text-small" onClick={() => onMark(null)}>
                Undo
              </Button>
            </span>
          )
        }
      />
      {isOther && mark === undefined && (
        <li className="flex flex-wrap gap-3 border-b border-hair py-2 pl-12">
          <Button look="danger" onClick={() => (setOther(false), onMark('failed'))}>
            Failed
          </Button>
          <Button onClick={() => (setOther(false), onMark('not-applicable'))}>Not on this machine</Button>
        </li>
      )}
      {isEntering && item.reading !== undefined && (
        <li ref={(row) => row?.scrollIntoView({ block: 'nearest' })} className="border-b border-hair py-3">
          <RunValue
            item={item}
            reading={item.reading}
            onCancel={() => setEntering(false)}
            onValue={(taken, isOk) => {
              setEntering(false)
              const { [item.id]: _, ...others } = run.marks
              onKeep({ values: { ...run.values, [item.id]: taken }, marks: isOk ? others : { ...others, [item.id]: 'failed' } })
              if (isOk) record([{ type: 'ticked', payload: { list: 'run', id: item.id, on: true } }])
            }}
          />
        </li>
      )}
    </>
  )
}

type RunValueProps = {
  readonly item: RunWords
  readonly reading: NonNullable<RunWords['reading']>
  readonly onValue: (taken: Run['values'][string], isOk: boolean) => void
  readonly onCancel: () => void
}

/** The value of an item, judged at once: one that is out of limits can't be ticked off, it has failed. */
function RunValue({ item, reading, onValue, onCancel }: RunValueProps) {
  const { format, tap } = usePlayer()
  const [text, setText] = useState('')
  const { unit, quantity } = reading
  const typed = text.trim() === '' ? null : readTypedValue(text, { ...format, unit, quantity })
  const value = typed?.ok === true ? typed.value : null
  const isIn = value === null || item.limits === null ? null : isWithin(item.limits, value, unit)
  const mark: { state: MarkState; words: string } | null =
    value === null
      ? null
      : isIn === null
        ? { state: 'open', words: 'noted' }
        : isIn
          ? { state: 'good', words: 'in limits' }
          : { state: 'bad', words: 'out of limits' }
  const take = (): void => {
    const read = typed ?? ok(null)
    if (read.ok && read.value !== null) onValue({ value: read.value, unit }, isIn !== false)
  }
  return (
    <ValueEntry
      label={item.title}
      quantity={quantity}
      text={text}
      onText={setText}
      unit={unit}
      onUnit={() => undefined}
      typed={typed}
      value={value}
      limits={item.limits}
      mark={mark}
      onEnter={take}
    >
      <div className="grid grid-cols-3 gap-2">
        <Button size="large" onClick={onCancel}>
          Later
        </Button>
        <Button look="primary" size="large" aria-disabled={value === null} onClick={() => tap(take)} className="col-span-2 text-body">
          {value === null ? 'Record' : `Record ${formatValue(value, unit, format)}`}
        </Button>
      </div>
    </ValueEntry>
  )
}
