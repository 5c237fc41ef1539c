import { useRef, useState } from 'react'

import { TextField } from '#src/components/ui/field.tsx'
import { Button } from '#src/components/ui/button.tsx'
import { NoteField, toLengthWords } from '#src/features/walk-player/parts/note-field.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { announce } from '#src/lib/announce.ts'

/** Tag number and reason: a machine that is not safe leaves only tagged, disabled and signed for. */
export function HoldForm({ onHeld, why: given = '' }: { readonly onHeld?: () => void; readonly why?: string }) {
  const { record, tap } = usePlayer()
  const [tagNo, setTagNo] = useState('')
  const [why, setWhy] = useState(given)
  const [isJudged, setJudged] = useState(false)
  const tagField = useRef<HTMLInputElement>(null)
  const whyField = useRef<HTMLTextAreaElement>(null)
  const tagError =
    tagNo.trim() === '' ? 'Write the number of the tag that hangs on the machine.' : tagNo.trim().length > 200 ? 'At most 200 characters.' : undefined
  const whyError = why.trim() === '' ? 'Write why it is not safe.' : toLengthWords(why)
  const hold = (): void => {
    setJudged(true)
    const wrong = tagError ?? whyError
    if (wrong !== undefined) {
      announce(wrong)
      if (tagError !== undefined) tagField.current?.focus()
      else whyField.current?.focus()
      return
    }
    if (record([{ type: 'held', payload: { tagNo: tagNo.trim(), why: why.trim() } }], 'Held.')) onHeld?.()
  }
  return (
    <div className="grid gap-4">
      <TextField
        ref={tagField}
        label="Tag number"
        value={tagNo}
        onChange={(event) => setTagNo(event.target.value)}
        error={isJudged ? tagError : undefined}
        autoComplete="off"
        className="figures"
      />
      <NoteField ref={whyField} label="Why it is not safe" value={why} onChange={setWhy} error={isJudged ? whyError : undefined} />
      <Button look="danger" size="large" onClick={() => tap(hold)} className="min-h-18 w-full text-body md:min-h-22">
        Hold it: not safe to hand back
      </Button>
    </div>
  )
}
