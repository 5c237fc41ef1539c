import type { NodeSize } from '#shared/chart/layout/sheet.ts'
import type { ChartNode } from '#shared/chart/document.ts'
import { coordinate, type Box, type Mark, type MarkPoint, type MarkRole, type Tone } from './marks.ts'
import { fonts, styleOf, type MarkFont } from './mark-style.ts'
import type { NodeWords } from './node-words.ts'
import { textWidth, wrapText } from './text-width.ts'

/** The outlines of ISO 5807 that nodes have; a check is a process box that carries a decision as its tab. */
type Outline = 'terminator' | 'process' | 'decision' | 'off-page' | 'predefined'

/** A node broken into lines, with the room it takes. */
export interface NodeShape extends NodeSize {
  readonly kind: ChartNode['kind']
  readonly outline: Outline
  readonly lines: readonly ShapeLine[]
}

interface ShapeLine {
  readonly text: string
  readonly role: MarkRole
  readonly font: MarkFont & { readonly line: number }
  /** px from the left edge to the text, for outlines whose text is set flush left. */
  readonly indent: number
  /** Stands before the text at the left edge of the box: the node's number, an outcome's numeral. */
  readonly lead: string
  readonly leadRole: MarkRole
  /** A hairline is drawn above this line. */
  readonly ruled: boolean
}

const boxWidth = 190
const terminatorMost = 172
const terminatorLeast = 112
/** Half the height and width of the decision tab on a check. */
const tabRadius = 13
const pentagonPoint = 15
const padTop = 12
const padBottom = 11
const padSide = 12
const listGap = 9
const barRoom = 10

function outlineOf(node: ChartNode): Outline {
  switch (node.kind) {
    case 'step':
      return 'process'
    case 'check':
    case 'reading':
    case 'proof':
      return 'decision'
    case 'jump':
      return node.returns === true ? 'predefined' : 'off-page'
    case 'start':
    case 'cause':
    case 'escalate':
    case 'hold':
    case 'back':
      return 'terminator'
  }
}

/** Breaks the words of a node into the lines of its outline and measures it. No line is wider than its outline allows. */
export function shapeNode(node: ChartNode, words: NodeWords, listOutcomes: boolean): NodeShape {
  const outline = outlineOf(node)
  return outline === 'terminator' || outline === 'off-page' ? centredShape(node, words, outline) : boxShape(node, words, outline, listOutcomes)
}

function linesOf(text: string, role: MarkRole, font: ShapeLine['font'], width: number, maxLines: number, indent = 0): readonly ShapeLine[] {
  return wrapText(text, { ...font, width, maxLines }).map((line) => ({ text: line, role, font, indent, lead: '', leadRole: role, ruled: false }))
}

/** The same lines with something standing before the first of them; an empty text still gives the line that carries it. */
function led(lines: readonly ShapeLine[], lead: string, leadRole: MarkRole, empty: ShapeLine): readonly ShapeLine[] {
  const [first = empty, ...rest] = lines
  return [{ ...first, lead, leadRole }, ...rest]
}

function heightOf(lines: readonly ShapeLine[]): number {
  return lines.reduce((sum, { font, ruled }) => sum + font.line + (ruled ? listGap : 0), 0)
}

function centredShape(node: ChartNode, words: NodeWords, outline: Outline): NodeShape {
  const isCause = node.kind === 'cause'
  const side = node.kind === 'back' ? 30 : outline === 'terminator' ? 18 : 14
  const most = terminatorMost - 2 * side
  const lines = [
    ...linesOf(words.title, isCause ? 'cause-title' : 'title', fonts.title, most, 4),
    ...linesOf(words.note.toUpperCase(), isCause ? 'cause-note' : 'note', fonts.note, most, 2),
  ]
  const widest = Math.max(0, ...lines.map(({ text, font }) => textWidth(text, font.size, font.face, font.tracking)))
  const text = heightOf(lines) + (node.kind === 'hold' ? barRoom : 0)
  return {
    kind: node.kind,
    outline,
    lines,
    width: outline === 'off-page' ? terminatorMost : Math.min(terminatorMost, Math.max(terminatorLeast, Math.ceil((widest + 2 * side) / 2) * 2)),
    height: Math.max(40, text + 16) + (outline === 'off-page' ? pentagonPoint - 4 : 0),
    above: 0,
  }
}

function boxShape(node: ChartNode, words: NodeWords, outline: Outline, listOutcomes: boolean): NodeShape {
  const inset = outline === 'predefined' ? 8 : 0
  const indent = padSide + inset + (words.number === '' ? 0 : Math.max(24, textWidth(words.number, fonts.number.size, 'mono') + 10))
  const width = boxWidth - indent - padSide - inset
  const listWidth = boxWidth - padSide * 2 - 20
  const outcomes = listOutcomes ? words.outcomes.flatMap((title, place) => outcomeLines(title, place, listWidth)) : []
  const lines = [
    ...led(linesOf(words.title, 'title', fonts.title, width, 4, indent), words.number, 'number', blank('title', fonts.title, indent)),
    ...linesOf(words.figure, 'figure', fonts.figure, width, 3, indent),
    ...linesOf(words.note.toUpperCase(), 'note', fonts.note, width, 3, indent),
    ...outcomes,
  ]
  const hasTab = outline === 'decision'
  return {
    kind: node.kind,
    outline,
    lines,
    width: boxWidth,
    height: Math.max(46, heightOf(lines) + padTop + padBottom + (hasTab ? 4 : 0)),
    above: hasTab ? tabRadius : 0,
  }
}

/** An outcome in the list under the title: its numeral stands before the first of its lines. */
function outcomeLines(title: string, place: number, width: number): readonly ShapeLine[] {
  const lines = led(linesOf(title, 'outcome', fonts.outcome, width, 2, padSide + 20), String(place + 1), 'outcome-numeral', blank('outcome', fonts.outcome, padSide + 20))
  return lines.map((line, index) => ({ ...line, ruled: place === 0 && index === 0 }))
}

function blank(role: MarkRole, font: ShapeLine['font'], indent: number): ShapeLine {
  return { text: '', role, font, indent, lead: '', leadRole: role, ruled: false }
}

/** The marks of a node in its place. */
export function drawShape(shape: NodeShape, box: Box, tone: Tone): readonly Mark[] {
  return [...outlineMarks(shape, box, tone), ...tabMarks(shape, box, tone), ...extraMarks(shape, box, tone), ...textMarks(shape, box, tone)]
}

function path(role: MarkRole, tone: Tone, d: string): Mark {
  return { kind: 'path', role, tone, d }
}

/** A rectangle with rounded ends when `radius` is half its height. */
export function rectPath({ x, y, width, height }: Box, radius = 0): string {
  const c = coordinate
  if (radius === 0) return `M${c(x)} ${c(y)}H${c(x + width)}V${c(y + height)}H${c(x)}Z`
  const r = Math.min(radius, height / 2, width / 2)
  const arc = (toX: number, toY: number): string => `A${c(r)} ${c(r)} 0 0 1 ${c(toX)} ${c(toY)}`
  return `M${c(x + r)} ${c(y)}H${c(x + width - r)}${arc(x + width, y + r)}V${c(y + height - r)}${arc(x + width - r, y + height)}H${c(x + r)}${arc(x, y + height - r)}V${c(y + r)}${arc(x + r, y)}Z`
}

const terminatorRadius = 30

function inset({ x, y, width, height }: Box, by: number): Box {
  return { x: x + by, y: y + by, width: width - 2 * by, height: height - 2 * by }
}

function outlineMarks({ kind, outline }: NodeShape, box: Box, tone: Tone): readonly Mark[] {
  const { x, y, width, height } = box
  switch (outline) {
    case 'process':
    case 'decision':
      return [path('body', tone, rectPath(box))]
    case 'predefined':
      return [path('body', tone, rectPath(box)), path('inner-line', tone, `M${coordinate(x + 7)} ${coordinate(y)}V${coordinate(y + height)}M${coordinate(x + width - 7)} ${coordinate(y)}V${coordinate(y + height)}`)]
    case 'off-page': {
      const shoulder = y + height - pentagonPoint
      return [{ kind: 'polygon', role: 'body', tone, points: [{ x, y }, { x: x + width, y }, { x: x + width, y: shoulder }, { x: x + width / 2, y: y + height }, { x, y: shoulder }] }]
    }
    case 'terminator': {
      const body = path(kind === 'cause' ? 'cause-body' : 'body', tone, rectPath(box, terminatorRadius))
      return kind === 'escalate' ? [body, path('inner-line', tone, rectPath(inset(box, 5), terminatorRadius - 5))] : [body]
    }
  }
}

function diamond(center: MarkPoint, radius: number): readonly MarkPoint[] {
  return [
    { x: center.x, y: center.y - radius },
    { x: center.x + radius, y: center.y },
    { x: center.x, y: center.y + radius },
    { x: center.x - radius, y: center.y },
  ]
}

function tabMarks({ kind, outline }: NodeShape, box: Box, tone: Tone): readonly Mark[] {
  if (outline !== 'decision') return []
  const center = { x: box.x + box.width / 2, y: box.y }
  const tab: Mark = { kind: 'polygon', role: 'tab', tone, points: diamond(center, tabRadius) }
  if (kind === 'proof') return [tab, { kind: 'polygon', role: 'tab-inner', tone, points: diamond(center, tabRadius - 6) }]
  return kind === 'reading' ? [tab, path('glyph', tone, scaleGlyph(center))] : [tab]
}

/** A scale of five ticks, the middle one longest. */
function scaleGlyph({ x, y }: MarkPoint): string {
  const ticks = [-6, -3, 0, 3, 6].map((offset) => {
    const half = offset === 0 ? 4 : Math.abs(offset) === 3 ? 2.5 : 1.5
    return `M${coordinate(x + offset)} ${coordinate(y - half)}V${coordinate(y + half)}`
  })
  return `M${coordinate(x - 8)} ${coordinate(y)}H${coordinate(x + 8)}${ticks.join('')}`
}

/** The bar of a hold, broken where the text stands, and the turning arrow of a way back. */
function extraMarks(shape: NodeShape, box: Box, tone: Tone): readonly Mark[] {
  const middle = box.y + box.height / 2
  if (shape.kind === 'hold') {
    const titles = shape.lines.filter(({ role }) => role === 'title')
    const y = firstTop(shape, box) + heightOf(titles) + 3
    return [path('bar', tone, rectPath({ x: box.x, y, width: box.width, height: 5 }))]
  }
  if (shape.kind === 'back') {
    const x = box.x + 10
    return [path('glyph', tone, `M${coordinate(x + 4)} ${coordinate(middle + 5)}H${coordinate(x + 7)}a5 5 0 0 0 0 -10H${coordinate(x)}m4 -4l-4 4l4 4`)]
  }
  return []
}

function firstTop({ lines, outline, kind }: NodeShape, box: Box): number {
  const extra = kind === 'hold' ? barRoom : 0
  const room = box.height - (outline === 'off-page' ? pentagonPoint - 4 : 0) - (outline === 'decision' ? 4 : 0) - heightOf(lines) - extra
  return box.y + (outline === 'decision' ? 4 : 0) + room / 2
}

function textMarks(shape: NodeShape, box: Box, tone: Tone): readonly Mark[] {
  const centred = shape.outline === 'terminator' || shape.outline === 'off-page'
  const marks: Mark[] = []
  let top = firstTop(shape, box)
  shape.lines.forEach((line, place) => {
    const { font, text } = line
    if (line.ruled) {
      top += listGap
      marks.push(path('rule-line', tone, `M${coordinate(box.x + padSide)} ${coordinate(top - listGap / 2)}H${coordinate(box.x + box.width - padSide)}`))
    }
    if (shape.kind === 'hold' && line.role === 'note' && shape.lines[place - 1]?.role !== 'note') top += barRoom
    const y = top + font.line / 2 + font.size * 0.36
    const x = centred ? box.x + box.width / 2 : box.x + line.indent
    if (line.lead !== '') marks.push(textMark(line.leadRole, tone, { x: box.x + padSide + (shape.outline === 'predefined' ? 8 : 0), y }, 'start', line.lead))
    if (text !== '') marks.push(textMark(line.role, tone, { x, y }, centred ? 'middle' : 'start', text))
    top += font.line
  })
  return marks
}

/** A line of text with the width that it takes in the face of its role. */
export function textMark(role: MarkRole, tone: Tone, at: MarkPoint, anchor: 'start' | 'middle', text: string): Mark {
  const { font } = styleOf(role, tone)
  return { kind: 'text', role, tone, at, anchor, text, width: font === undefined ? 0 : textWidth(text, font.size, font.face, font.tracking) }
}
