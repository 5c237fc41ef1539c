import type { Face } from './text-width.ts'
import type { MarkRole, Tone } from './marks.ts'

/** Names of the colours that pictures take from the theme. */
export const pictureColours = ['well', 'card', 'ink', 'ink-2', 'cord', 'on-cord', 'rule', 'hair', 'cord-wash'] as const
/** One colour of the theme. */
export type PictureColour = (typeof pictureColours)[number]

/** How a mark looks; colours are names, lengths px. */
export interface MarkStyle {
  readonly fill: PictureColour | 'none'
  readonly stroke: PictureColour | 'none'
  readonly strokeWidth: number
  readonly dash?: string
  readonly font?: MarkFont
}

/** Type of a text mark; `tracking` in em. */
export interface MarkFont {
  readonly face: Face
  readonly size: number
  readonly weight: 400 | 500 | 600
  readonly tracking: number
}

/** The type of each text, and the distance of its lines in px. */
export const fonts = {
  title: { face: 'condensed', size: 15, weight: 600, tracking: 0, line: 18 },
  number: { face: 'mono', size: 14, weight: 400, tracking: 0, line: 18 },
  note: { face: 'condensed', size: 12, weight: 600, tracking: 0.04, line: 16 },
  figure: { face: 'mono', size: 13, weight: 400, tracking: 0, line: 17 },
  outcome: { face: 'condensed', size: 14, weight: 400, tracking: 0, line: 17 },
  numeral: { face: 'condensed', size: 13, weight: 600, tracking: 0, line: 16 },
} as const satisfies Record<string, MarkFont & { line: number }>

const outlineOf: Readonly<Record<Tone, Pick<MarkStyle, 'stroke' | 'strokeWidth' | 'dash'>>> = {
  plain: { stroke: 'ink', strokeWidth: 2 },
  quiet: { stroke: 'rule', strokeWidth: 1.5 },
  spent: { stroke: 'rule', strokeWidth: 2, dash: '5 4' },
  walked: { stroke: 'ink', strokeWidth: 2.5 },
  current: { stroke: 'ink', strokeWidth: 4 },
}

const edgeOf: Readonly<Record<Tone, Pick<MarkStyle, 'stroke' | 'strokeWidth' | 'dash'>>> = {
  plain: { stroke: 'rule', strokeWidth: 2 },
  quiet: { stroke: 'rule', strokeWidth: 1.5 },
  spent: { stroke: 'cord', strokeWidth: 2.5, dash: '1.5 4.5' },
  walked: { stroke: 'cord', strokeWidth: 6 },
  current: { stroke: 'cord', strokeWidth: 6 },
}

const isFaint = (tone: Tone): boolean => tone === 'quiet' || tone === 'spent'

/** How a mark of a role and a tone looks. Every state differs in more than colour: width of the line, dashes, fill. */
export function styleOf(role: MarkRole, tone: Tone): MarkStyle {
  const outline = outlineOf[tone]
  const text = (font: MarkFont, fill: PictureColour): MarkStyle => ({ fill, stroke: 'none', strokeWidth: 0, font })
  const quietInk: PictureColour = isFaint(tone) ? 'ink-2' : 'ink'
  switch (role) {
    case 'body':
    case 'tab':
      return { fill: tone === 'current' && role === 'body' ? 'cord-wash' : 'card', ...outline }
    case 'cause-body':
      return { fill: isFaint(tone) ? 'card' : 'cord', ...outline }
    case 'inner-line':
    case 'tab-inner':
      return { fill: 'none', stroke: outline.stroke, strokeWidth: Math.min(outline.strokeWidth, 2) }
    case 'glyph':
      return { fill: 'none', stroke: outline.stroke, strokeWidth: 1.5 }
    case 'bar':
      return { fill: outline.stroke, stroke: 'none', strokeWidth: 0 }
    case 'rule-line':
      return { fill: 'none', stroke: 'hair', strokeWidth: 1 }
    case 'title':
      return text(fonts.title, quietInk)
    case 'cause-title':
      return text(fonts.title, isFaint(tone) ? 'ink-2' : 'on-cord')
    case 'number':
      return text(fonts.number, 'ink-2')
    case 'note':
      return text(fonts.note, 'ink-2')
    case 'cause-note':
      return text(fonts.note, isFaint(tone) ? 'ink-2' : 'on-cord')
    case 'figure':
      return text(fonts.figure, quietInk)
    case 'outcome':
      return text(fonts.outcome, quietInk)
    case 'outcome-numeral':
      return text(fonts.numeral, isFaint(tone) ? 'ink-2' : 'cord')
    case 'edge':
      return { fill: 'none', ...edgeOf[tone] }
    case 'edge-loop':
      return { fill: 'none', ...edgeOf[tone], dash: tone === 'walked' ? '12 7' : '7 5' }
    case 'edge-otherwise':
      return { fill: 'none', ...edgeOf[tone], dash: '2 4' }
    case 'arrow':
      return { fill: edgeOf[tone].stroke, stroke: 'none', strokeWidth: 0 }
    case 'balloon':
      return { fill: 'card', stroke: isFaint(tone) ? 'rule' : 'cord', strokeWidth: tone === 'walked' ? 2.5 : 1.5 }
    case 'balloon-numeral':
      return text(fonts.numeral, quietInk)
  }
}
