import { useState } from 'react'

import type { WalkResult } from '#shared/walk/state.ts'
import { ActList } from '#src/features/walk-player/parts/act-list.tsx'
import { NoteField, toLengthWords } from '#src/features/walk-player/parts/note-field.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { resultHints } from '#src/features/walk-player/words.ts'
import { resultWords } from '#src/lib/walk-words.ts'

type CloseActsProps = {
  readonly results: readonly WalkResult[]
  readonly withNote?: boolean
  /** Whether closing is what the page is for. */
  readonly leads?: boolean
}

/** The ends that the walk can come to from here. Closing is the one act that has no way back, so it says so. */
export function CloseActs({ results, withNote = true, leads = true }: CloseActsProps) {
  const { record } = usePlayer()
  const [why, setWhy] = useState('')
  if (results.length === 0) return null
  const close = (result: WalkResult): void => {
    if (toLengthWords(why) !== undefined) return
    record([{ type: 'closed', payload: { result, ...(why.trim() === '' ? {} : { why: why.trim() }) } }], `Closed: ${resultWords[result]}.`)
  }
  return (
    <div className="grid gap-4">
      {withNote && <NoteField label="In a word (may stay empty)" value={why} onChange={setWhy} rows={2} />}
      <ActList
        label="Close the walk"
        acts={results.map((result, index) => ({
          key: result,
          title: `Close: ${resultWords[result].toLowerCase()}`,
          words: resultHints[result],
          look: leads && index === 0 ? 'leading' : 'plain',
          onPress: () => close(result),
        }))}
      />
      <p className="text-small text-ink-2">A closed walk takes no more entries.</p>
    </div>
  )
}
