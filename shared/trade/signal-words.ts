/** Signal words from the highest down (ANSI Z535.4-2007, 4.14; ISO 3864-2 grades the first three alike). */
export const signalWords = ['DANGER', 'WARNING', 'CAUTION', 'NOTICE'] as const
/** One of the four signal words. */
export type SignalWord = (typeof signalWords)[number]

/** How badly a hazard can end. */
export const harms = ['death', 'serious-injury', 'minor-injury', 'damage'] as const
/** One of the closed list of harms. */
export type Harm = (typeof harms)[number]

/**
 * Whether a signal word fits a harm (ANSI Z535.4-2007, 4.14): DANGER and WARNING speak of death or serious injury,
 * CAUTION of minor or moderate injury, NOTICE of damage alone.
 */
export function fitsHarm(word: SignalWord, harm: Harm): boolean {
  switch (word) {
    case 'DANGER':
    case 'WARNING':
      return harm === 'death' || harm === 'serious-injury'
    case 'CAUTION':
      return harm === 'minor-injury'
    case 'NOTICE':
      return harm === 'damage'
  }
}

/** The word under which several hazards stand on one panel: the highest of them; `null` for none (ANSI Z535.4-2007, 4.14). */
export function highestWord(words: readonly SignalWord[]): SignalWord | null {
  return signalWords.find((word) => words.includes(word)) ?? null
}
