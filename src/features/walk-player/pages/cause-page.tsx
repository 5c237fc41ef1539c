import { useRef, useState } from 'react'
import { z } from 'zod'

import type { CausePage as Page } from '#shared/walk/page.ts'
import { systemWords } from '#shared/trade/systems.ts'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { ActList } from '#src/features/walk-player/parts/act-list.tsx'
import { NoteField, toLengthWords } from '#src/features/walk-player/parts/note-field.tsx'
import { PageHead, Sheet } from '#src/features/walk-player/parts/page-parts.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useScratch } from '#src/features/walk-player/scratch.ts'
import { announce } from '#src/lib/announce.ts'

/** The walk has come to a suspect. With a proof on the trail that settles it; without one it takes a second look, in words. */
export function CausePage({ page }: { readonly page: Page }) {
  const { walk, record } = usePlayer()
  const { cause, proofEventId, proof } = page
  const [note, setNote] = useScratch(walk.walkId, `cause.${page.node.place}`, z.string())
  const [error, setError] = useState<string | undefined>()
  const field = useRef<HTMLTextAreaElement>(null)
  const text = note ?? ''

  const settle = (type: 'cause-proven' | 'cause-not-proven', said: string): void => {
    if (cause.causeId === null) return
    const wrong = proofEventId !== null ? undefined : text.trim() === '' ? 'Write what the second look showed.' : toLengthWords(text)
    setError(wrong)
    if (wrong !== undefined) {
      announce(wrong)
      field.current?.focus()
      return
    }
    const evidence = proofEventId === null ? { sight: { photoIds: [], note: text.trim() } } : { proofEventId }
    if (record([{ type, payload: { causeId: cause.causeId, ...evidence } }], said)) setNote(null)
  }

  return (
    <Sheet
      what={
        <>
          <PageHead knot="cause" over={['Is it this?', cause.system === null ? null : systemWords[cause.system]]} title={cause.title} />
          {cause.isUnsafe && (
            <p className="mt-3">
              <StateMark state="bad">Not safe to use until it is put right.</StateMark>
            </p>
          )}
          {proof !== null && <p className="mt-3">Proven by: {proof.title}</p>}
          {proofEventId === null && (
            <div className="mt-5 grid gap-3">
              <p>A theory is proved before anything is bought. Look a second time, in good light.</p>
              <NoteField
                ref={field}
                label="What the second look showed"
                value={text}
                onChange={(value) => setNote(value === '' ? null : value)}
                error={error}
              />
            </div>
          )}
        </>
      }
      answers={
        <ActList
          label="Is it this?"
          acts={[
            { key: 'yes', title: 'That is it', words: 'on to the fix', look: 'leading', onPress: () => settle('cause-proven', `Proven: ${cause.title}`) },
            {
              key: 'no',
              title: 'Not this',
              words: 'it is ruled out, the walk goes on',
              onPress: () => settle('cause-not-proven', `Ruled out: ${cause.title}`),
            },
          ]}
        />
      }
    />
  )
}
