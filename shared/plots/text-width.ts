/**
 * Advance widths of IBM Plex Sans Condensed, weight 600, in thousandths of the type size, from the metrics of the font itself: U+0020 to U+007E, then
 * U+00A0 to U+00FF. Lighter weights are a little narrower, so an estimate by these never falls short of them.
 */
const ascii = [
  212, 284, 429, 582, 533, 870, 644, 235, 303, 303, 514, 540, 274, 362, 274, 401, 540, 540, 540, 540, 540, 540, 540, 540, 540, 540, 282, 282, 540, 540, 540, 447,
  811, 606, 600, 581, 625, 544, 523, 641, 651, 387, 494, 614, 473, 737, 651, 642, 583, 642, 601, 546, 524, 624, 583, 861, 595, 566, 540, 299, 401, 299, 540, 502,
  540, 507, 544, 464, 544, 505, 328, 492, 532, 252, 255, 511, 268, 802, 532, 506, 544, 544, 357, 449, 334, 533, 476, 739, 488, 483, 452, 329, 346, 329, 540,
]
const latin = [
  212, 284, 491, 520, 560, 575, 346, 515, 540, 712, 395, 494, 540, 362, 420, 540, 422, 540, 319, 320, 540, 539, 603, 316, 540, 320, 383, 494, 728, 757, 718, 439,
  606, 606, 606, 606, 606, 606, 859, 581, 544, 544, 544, 544, 387, 387, 387, 387, 626, 651, 642, 642, 642, 642, 642, 540, 641, 624, 624, 624, 624, 566, 582, 613,
  507, 507, 507, 507, 507, 507, 782, 464, 505, 505, 505, 505, 254, 254, 254, 254, 533, 532, 506, 506, 506, 506, 506, 540, 512, 533, 533, 533, 533, 483, 544, 483,
]
const others: Readonly<Record<string, number>> = { '\u2013': 528, '\u2014': 702, '\u2018': 269, '\u2019': 269, '\u201c': 474, '\u201d': 474, '\u2026': 790, '\u202f': 212, '\u2212': 540 }

/** Everything else: letters of other scripts are as wide as the type is high, combining marks and joiners take no room. */
function advanceOf(char: string): number {
  const code = char.codePointAt(0) ?? 0
  if (code < 0x20 || (code >= 0x7f && code < 0xa0) || (code >= 0x200b && code <= 0x200f)) return 0
  if (code <= 0x7e) return ascii[code - 0x20] ?? 0
  if (code <= 0xff) return latin[code - 0xa0] ?? 0
  const known = others[char]
  if (known !== undefined) return known
  if (code >= 0x300 && code <= 0x36f) return 0
  if (code < 0x590) return 700
  return code > 0xffff ? 1300 : 1050
}

/** The faces that pictures use. */
export type Face = 'condensed' | 'mono'

/**
 * Width of one line of text in px, without a browser: condensed by the font's own advances (kerning left out), mono at 600 thousandths a letter.
 * `tracking` is extra room after every letter, in em.
 */
export function textWidth(text: string, size: number, face: Face = 'condensed', tracking = 0): number {
  let thousandths = 0
  for (const char of text) thousandths += (face === 'mono' ? Math.max(600, char > '\u00ff' ? advanceOf(char) : 600) : advanceOf(char)) + tracking * 1000
  return (thousandths / 1000) * size
}

/** How lines are to be broken: type size, width, how many at most. */
export interface WrapRules {
  readonly size: number
  readonly width: number
  readonly maxLines: number
  readonly face?: Face
  readonly tracking?: number
}

/**
 * Breaks a text into lines that are never wider than asked: between words, inside a word only where it is too wide for a line of its own. What does not fit
 * into the lines ends in an ellipsis. No-break spaces hold. An empty text gives no line.
 */
export function wrapText(text: string, rules: WrapRules): readonly string[] {
  const fits = (line: string): boolean => textWidth(line, rules.size, rules.face, rules.tracking) <= rules.width
  const words = text.split(/[ \t\r\n]+/).filter((word) => word !== '').flatMap((word) => pieces(word, fits))
  const lines: string[] = []
  for (const word of words) {
    const last = lines.at(-1)
    if (last !== undefined && fits(`${last} ${word}`)) lines[lines.length - 1] = `${last} ${word}`
    else lines.push(word)
    if (lines.length > rules.maxLines) break
  }
  if (lines.length <= rules.maxLines) return lines
  const kept = lines.slice(0, rules.maxLines)
  let end = kept.at(-1) ?? ''
  while (end !== '' && !fits(`${end}…`)) end = [...end].slice(0, -1).join('').trimEnd()
  return [...kept.slice(0, -1), `${end}…`]
}

/** A word cut into the largest pieces that fit a line. */
function pieces(word: string, fits: (line: string) => boolean): readonly string[] {
  if (fits(word)) return [word]
  const parts: string[] = []
  let part = ''
  for (const char of word) {
    if (part !== '' && !fits(part + char)) {
      parts.push(part)
      part = ''
    }
    part += char
  }
  return part === '' ? parts : [...parts, part]
}
