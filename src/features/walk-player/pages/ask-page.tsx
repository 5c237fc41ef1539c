import { useState } from 'react'

import type { QuestionId } from '#shared/lib/ids.ts'
import type { AskPage as Page } from '#shared/walk/page.ts'
import { ActList } from '#src/features/walk-player/parts/act-list.tsx'
import { NoteField, toLengthWords } from '#src/features/walk-player/parts/note-field.tsx'
import { PageHead, Sheet } from '#src/features/walk-player/parts/page-parts.tsx'
import { SkippedList } from '#src/features/walk-player/parts/skipped-list.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { newId } from '#src/lib/device.ts'
import type { EventDraft } from '#src/lib/walk-log.ts'

/** What is asked where nothing was written: an answer of the lead always answers a question. */
const plainQuestion = 'How do I go on from here?'

/** The end of what the chart knows: what was skipped is shown once more, then the lead is asked. */
export function AskPage({ page }: { readonly page: Page }) {
  const { record } = usePlayer()
  const [text, setText] = useState('')
  const ask = (): void => {
    if (toLengthWords(text) !== undefined) return
    // Made by newId, a UUID.
    const questionId = newId() as QuestionId
    const question: EventDraft = { type: 'asked', payload: { questionId, text: text.trim() === '' ? plainQuestion : text.trim(), photoIds: [] } }
    record([question, { type: 'escalated', payload: { reason: page.reason } }], 'The lead is asked.')
  }
  return (
    <Sheet
      what={
        <>
          <PageHead knot="escalate" over={['Ask the lead', page.node.chartTitle]} title={page.reasonWords} />
          {page.node.do !== null && <p className="mt-3">{page.node.do}</p>}
          <SkippedList skipped={page.skipped} />
          <div className="mt-6">
            <NoteField
              label="What the lead should know"
              hint="You may leave it empty: the lead sees everything that was found."
              value={text}
              onChange={setText}
            />
          </div>
        </>
      }
      answers={
        <ActList
          label="Ask the lead"
          acts={[{ key: 'ask', title: 'Ask the lead', words: 'the walk waits here for the answer', look: 'leading', onPress: ask }]}
        />
      }
    />
  )
}
