import type { ReactNode } from 'react'

import { AnswerKey } from '#src/features/walk-player/parts/answer-list.tsx'
import { OutcomeButton } from '#src/features/walk-player/parts/outcome-button.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'

export type Act = {
  readonly key: string
  readonly title: string
  readonly words?: ReactNode
  readonly look?: 'plain' | 'leading'
  readonly disabled?: boolean
  readonly onPress: () => void
}

/** What can be done on a page that asks no question, numbered like outcomes so that it can be said over a shoulder. */
export function ActList({ label, acts }: { readonly label: string; readonly acts: readonly Act[] }) {
  const { tap } = usePlayer()
  return (
    <div role="group" aria-label={label} className="grid gap-3">
      {acts.map(({ key, onPress, ...act }, index) => {
        const press = (): void => {
          if (act.disabled !== true) tap(onPress)
        }
        return (
          <div key={key}>
            <OutcomeButton {...act} numeral={index + 1} onPress={press} />
            <AnswerKey numeral={index + 1} words={act.title} run={press} />
          </div>
        )
      })}
    </div>
  )
}
