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

/** What can be done on a page that asks no question, the first nine numbered like outcomes so that they can be said over a shoulder. */
export function ActList({ label, acts }: { readonly label: string; readonly acts: readonly Act[] }) {
  const { tap } = usePlayer()
  return (
    <div role="group" aria-label={label} className="grid gap-3">
      {acts.map(({ key, onPress, ...act }, index) => {
        const numeral = index < 9 ? index + 1 : null
        const press = (): void => {
          if (act.disabled !== true) tap(onPress)
        }
        return (
          <div key={key}>
            <OutcomeButton {...act} numeral={numeral} onPress={press} />
            <AnswerKey numeral={numeral} words={act.title} run={press} />
          </div>
        )
      })}
    </div>
  )
}
