import type { ReactNode } from 'react'
import { useRef, useState } from 'react'

import type { QuestionId } from '#shared/lib/ids.ts'
import type { NodeName } from '#shared/walk/page.ts'
import { nameAt } from '#shared/walk/words.ts'
import { questionWords } from '#shared/walk/select.ts'
import { Button } from '#src/components/ui/button.tsx'
import { NoteField, toLengthWords } from '#src/features/walk-player/parts/note-field.tsx'
import { QuestionList } from '#src/features/walk-player/pages/escalated-page.tsx'
import { Panel } from '#src/features/walk-player/panels/panel.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { announce } from '#src/lib/announce.ts'
import { newId } from '#src/lib/device.ts'
import type { EventDraft } from '#src/lib/walk-log.ts'

type WritingProps = {
  readonly label: string
  readonly hint?: string
  /** What is missing when nothing is written. */
  readonly wanted: string
  readonly acts: readonly {
    readonly words: string
    readonly look: 'primary' | 'quiet' | 'danger'
    readonly said: string
    readonly toDrafts: (text: string) => readonly EventDraft[]
  }[]
  /** Between the writing and its buttons. */
  readonly children?: ReactNode
}

/** A text and what is done with it; the panel closes once it is recorded. */
function Writing({ label, hint, wanted, acts, children }: WritingProps) {
  const { record, closePanel, tap } = usePlayer()
  const [text, setText] = useState('')
  const [error, setError] = useState<string | undefined>()
  const field = useRef<HTMLTextAreaElement>(null)
  const send = (act: WritingProps['acts'][number]): void => {
    const wrong = text.trim() === '' ? wanted : toLengthWords(text)
    setError(wrong)
    if (wrong !== undefined) {
      announce(wrong)
      field.current?.focus()
      return
    }
    if (record(act.toDrafts(text.trim()), act.said)) closePanel()
  }
  return (
    <>
      <NoteField ref={field} label={label} value={text} onChange={setText} error={error} rows={5} {...(hint === undefined ? {} : { hint })} />
      {children}
      <div className="flex flex-wrap gap-3">
        {acts.map((act) => (
          <Button key={act.words} look={act.look} size="large" onClick={() => tap(() => send(act))}>
            {act.words}
          </Button>
        ))}
      </div>
    </>
  )
}

/** The check that the page is about; steps that stand on its page belong to it. */
function useHereNode(): NodeName {
  const { walk, charts, page } = usePlayer()
  const shown = page.kind === 'paused' ? page.under : page
  if (shown.kind === 'caution') return shown.guards
  return 'node' in shown ? shown.node : nameAt(charts, walk, walk.node)
}

function useHere(): string {
  const { number, title } = useHereNode()
  return number === '' ? title : `${number} ${title}`
}

export function NotePanel() {
  return (
    <Panel title="Write a note" over={useHere()}>
      <Writing
        label="Note"
        hint="Seen, heard, done. No names or private matters of the customer."
        wanted="Write the note first."
        acts={[{ words: 'Keep the note', look: 'primary', said: 'Note kept.', toDrafts: (text) => [{ type: 'note-added', payload: { text, photoIds: [] } }] }]}
      />
    </Panel>
  )
}

export function FlagPanel() {
  const { place: node } = useHereNode()
  return (
    <Panel title="Something is wrong with this check" over={useHere()}>
      <Writing
        label="What is wrong with it"
        hint="The lead reads this where the chart is written. It changes nothing in this walk."
        wanted="Write what is wrong with it first."
        acts={[
          {
            words: 'Flag it',
            look: 'primary',
            said: 'Flagged for the lead.',
            toDrafts: (text) => [{ type: 'flagged', payload: { node, text, photoIds: [] } }],
          },
        ]}
      />
    </Panel>
  )
}

export function AskPanel() {
  const { walk, charts } = usePlayer()
  const canWait = walk.phase === 'at-node' || walk.phase === 'at-cause'
  // Made by newId, a UUID.
  const toAsked = (text: string): EventDraft => ({ type: 'asked', payload: { questionId: newId() as QuestionId, text, photoIds: [] } })
  return (
    <Panel title="Ask the lead" over={useHere()}>
      <Writing
        label="Question"
        hint="The lead sees the whole walk with it."
        wanted="Write the question first."
        acts={[
          { words: 'Ask, and go on', look: 'primary', said: 'The lead is asked.', toDrafts: (text) => [toAsked(text)] },
          ...(canWait
            ? [
                {
                  words: 'Ask, and wait here',
                  look: 'quiet' as const,
                  said: 'The lead is asked. The walk waits.',
                  toDrafts: (text: string): EventDraft[] => [toAsked(text), { type: 'escalated', payload: { reason: 'Asked from the bench' } }],
                },
              ]
            : []),
        ]}
      />
      <QuestionList questions={questionWords(charts, walk)} />
    </Panel>
  )
}

export function GiveUpPanel() {
  const words = useHere()
  return (
    <Panel title="Give this walk up" over={words}>
      <p>What was found stays on record. The walk takes no more entries and can’t be taken up again: for a break, pause it instead.</p>
      <Writing
        label="Why it is given up"
        wanted="Write why first: it can’t be undone."
        acts={[{ words: 'Give it up for good', look: 'danger', said: 'Given up.', toDrafts: (why) => [{ type: 'abandoned', payload: { why } }] }]}
      />
    </Panel>
  )
}
