import { formatValue } from '#shared/units/format-value.ts'
import { heldAgainst, judgeTries, takenOnce } from '#shared/walk/judging.ts'
import type { ProofPage, ReadingPage } from '#shared/walk/page.ts'
import { OutcomeButton } from '#src/features/walk-player/parts/outcome-button.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useAnswering } from '#src/features/walk-player/use-answering.ts'
import { toOfferedWords } from '#src/features/walk-player/words.ts'

/** The value that is already there, to be kept with one tap instead of measured again. */
export function OfferedValue({ page }: { readonly page: ReadingPage | ProofPage }) {
  const { format, tap } = usePlayer()
  const { answer } = useAnswering(page)
  const { offered, outcomes, judging } = page
  const choice = outcomes.find(({ outcome }) => outcome === offered?.answer.outcome)
  if (offered === null || choice === undefined) return null
  const { value, unit } = offered.answer
  const title = value === null || unit === null ? choice.title : `${formatValue(value, unit, format)}, ${choice.title}`
  const keep = (): void => {
    const isMeasured = value !== null && unit !== null
    const again = heldAgainst(takenOnce(judging), offered.heldAgainst)
    const isJudged = isMeasured && again !== null && judgeTries(again, [value], unit).kind === 'outcome'
    answer({ choice, reuses: offered, said: title, judgedBy: isJudged ? 'limits' : 'hand', ...(isMeasured && { measured: { value, unit } }) })
  }
  return <OutcomeButton numeral={null} title={`Keep ${title}`} words={toOfferedWords(offered)} look="leading" onPress={() => tap(keep)} />
}
