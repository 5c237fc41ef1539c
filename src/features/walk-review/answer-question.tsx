import { useRef, useState } from 'react'

import type { Place } from '#shared/lib/ids.ts'
import { noteMaxBytes } from '#shared/walk/events.ts'
import type { Question } from '#shared/walk/state.ts'
import { Button } from '#src/components/ui/button.tsx'
import { controlClass, describedBy, FieldFrame, SelectField } from '#src/components/ui/field.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { announce } from '#src/lib/announce.ts'
import { toWords } from '#src/lib/problem-words.ts'

type AnswerQuestionProps = {
  readonly question: Question
  readonly askedBy: string
  /** Where the walk stood when it was asked. */
  readonly at: string
  /** Nodes where the lead may send the walk; empty where it can't be sent anywhere. */
  readonly goTos: readonly { readonly place: Place; readonly words: string }[]
  readonly onAnswer: (text: string, goTo: Place | null) => Promise<void>
}

/** A question that waits for the lead, and the answer to it. */
export function AnswerQuestion({ question, askedBy, at, goTos, onAnswer }: AnswerQuestionProps) {
  const [text, setText] = useState('')
  const [goTo, setGoTo] = useState<Place | null>(null)
  const [error, setError] = useState<string | undefined>()
  const [problem, setProblem] = useState<string | null>(null)
  const [isSending, setSending] = useState(false)
  const field = useRef<HTMLTextAreaElement>(null)
  const id = `answer-${question.questionId}`

  const send = async (): Promise<void> => {
    const wrong =
      text.trim() === ''
        ? 'Write the answer first.'
        : new TextEncoder().encode(text).length > noteMaxBytes
          ? 'An answer holds at most 10 kB. Shorten it.'
          : undefined
    setError(wrong)
    setProblem(null)
    if (wrong !== undefined) {
      field.current?.focus()
      return
    }
    setSending(true)
    try {
      await onAnswer(text.trim(), goTo)
      announce('Answered.')
    } catch (failure) {
      setProblem(toWords(failure))
      setSending(false)
    }
  }

  return (
    <form
      id="question"
      data-screen-only
      className="mt-4 grid gap-3 border-l-4 border-info bg-card p-4 [--mark-ground:var(--card)]"
      onSubmit={(event) => {
        event.preventDefault()
        void send()
      }}
    >
      <div>
        <p className="label">
          {askedBy} asks, at {at}
        </p>
        <p className="whitespace-pre-wrap">{question.text}</p>
      </div>
      <FieldFrame id={id} label="Answer" error={error}>
        <textarea
          ref={field}
          id={id}
          rows={3}
          value={text}
          onChange={(event) => setText(event.target.value)}
          aria-invalid={error !== undefined || undefined}
          aria-describedby={describedBy(id, { error })}
          className={controlClass}
        />
      </FieldFrame>
      {goTos.length > 0 && (
        <SelectField<string>
          label="Go on at"
          value={goTo ?? ''}
          choices={[{ value: '', words: 'Where it stands' }, ...goTos.map(({ place, words }) => ({ value: place, words }))]}
          onChange={(event) => setGoTo(goTos.find(({ place }) => place === event.target.value)?.place ?? null)}
        />
      )}
      {problem !== null && (
        <Notice state="bad" title="Not answered" role="alert">
          {problem}
        </Notice>
      )}
      <Button type="submit" look="primary" busy={isSending && 'Answering'} className="justify-self-start">
        Answer
      </Button>
    </form>
  )
}
