import type { Ref } from 'react'
import { useId } from 'react'

import { noteMaxBytes } from '#shared/walk/events.ts'
import { controlClass, describedBy, FieldFrame } from '#src/components/ui/field.tsx'

type NoteFieldProps = {
  readonly label: string
  readonly hint?: string
  readonly value: string
  readonly onChange: (value: string) => void
  readonly error?: string | undefined
  readonly rows?: number
  readonly ref?: Ref<HTMLTextAreaElement>
}

/** Lines of writing. What is too long is said while it is written, never cut. */
export function NoteField({ label, hint, value, onChange, error, rows = 3, ref }: NoteFieldProps) {
  const id = useId()
  const words = error ?? toLengthWords(value)
  return (
    <FieldFrame id={id} label={label} hint={hint} error={words}>
      <textarea
        ref={ref}
        id={id}
        rows={rows}
        value={value}
        onChange={(event) => onChange(event.target.value)}
        aria-invalid={words !== undefined || undefined}
        aria-describedby={describedBy(id, { hint, error: words })}
        className={`${controlClass} resize-y`}
      />
    </FieldFrame>
  )
}

/** What is wrong with the length of a note; `undefined` when nothing is. */
export function toLengthWords(text: string): string | undefined {
  return new TextEncoder().encode(text).length > noteMaxBytes ? 'A note holds at most 10 kB. Shorten it, or split it into two notes.' : undefined
}
