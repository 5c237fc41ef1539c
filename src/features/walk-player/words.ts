import { assertNever } from '#shared/lib/assert-never.ts'
import type { OfferedAnswer } from '#shared/walk/page.ts'
import type { SignalWord } from '#shared/trade/signal-words.ts'
import type { WalkResult } from '#shared/walk/state.ts'
import type { SavedState } from '#src/lib/walk-log.ts'

/** "DANGER" -> "Danger", for where the panel's capitals are not to be seen. */
export function toTitleWord(word: SignalWord): string {
  return word.charAt(0) + word.slice(1).toLowerCase()
}

/** What a result means, under its button. */
export const resultHints: Readonly<Record<WalkResult, string>> = {
  repaired: 'fixed, run, ready to hand back',
  'no-cause-found': 'the chart knows no more; counted apart from causes',
  'not-reproduced': 'it did nothing wrong here',
  held: 'tagged and disabled',
  'not-repaired': 'the cause stands, nothing was done about it',
  referred: 'another shop or the maker goes on',
}

/** Whether what was tapped is on the server, in words. */
export function toSavedWords(saved: SavedState): string {
  switch (saved.kind) {
    case 'saved':
      return 'saved'
    case 'sending':
      return saved.count === 1 ? 'saving' : `saving ${saved.count}`
    case 'waiting':
      return `${saved.count} not sent yet`
    case 'stuck':
      return 'not saved'
    default:
      return assertNever(saved)
  }
}

/** "1 tap", "3 taps". */
export function toCount(count: number, one: string, many: string): string {
  return `${count}\u00a0${count === 1 ? one : many}`
}

/** Where an offered answer comes from. */
export function toOfferedWords({ from }: OfferedAnswer): string {
  switch (from) {
    case 'noticed':
      return 'you noticed this on the way: tap to keep it'
    case 'stepped-back':
      return 'your answer before you stepped back: tap to keep it'
  }
}
