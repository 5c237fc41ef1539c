import { styleOf, type MarkStyle, type PictureColour } from './mark-style.ts'
import { coordinate, type Mark, type MarkGroup, type MarkPoint, type Picture } from './marks.ts'

/** Colours of the sheet by name. */
export type PictureTheme = Readonly<Record<PictureColour, string>>

/** Colours for a sheet on its own, those of the screens: light, dark, and black on white for print. */
export const pictureThemes = {
  light: { well: '#e1e8eb', card: '#fbfcfd', ink: '#12232b', 'ink-2': '#3f545e', cord: '#2a5a69', 'on-cord': '#ffffff', rule: '#6b7f89', hair: '#b4c2c9', 'cord-wash': '#d5e8ee' },
  dark: { well: '#091116', card: '#14222a', ink: '#e8eff2', 'ink-2': '#a9bac2', cord: '#8fc0cc', 'on-cord': '#0d171c', rule: '#7e939d', hair: '#2f434d', 'cord-wash': '#123945' },
  print: { well: '#ffffff', card: '#ffffff', ink: '#000000', 'ink-2': '#000000', cord: '#000000', 'on-cord': '#ffffff', rule: '#000000', hair: '#000000', 'cord-wash': '#ffffff' },
} as const satisfies Record<string, PictureTheme>

/** Font families of the two faces, with fallbacks for readers that lack Plex. */
export const familyOf = {
  condensed: "'IBM Plex Sans Condensed', 'Arial Narrow', sans-serif",
  mono: "'IBM Plex Mono', 'DejaVu Sans Mono', monospace",
} as const

/** Text made safe for XML, in content and in quoted attributes. Characters that XML does not allow at all are dropped. */
export function escapeXml(text: string): string {
  return text
    .replaceAll(/[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]|[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/g, '')
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;')
    .replaceAll("'", '&#39;')
}

/** A picture as an SVG file of its own: no scripts, no outside references, colours and type in an embedded style. Same picture and theme, same text. */
export function toSvg(picture: Picture, theme: PictureTheme): string {
  const styles = new Map<string, string>()
  const body = picture.groups.map((group) => groupSvg(group, theme, styles)).join('\n')
  const rules = [...styles].map(([rule, name]) => `.${name}{${rule}}`).join('')
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${picture.width}" height="${picture.height}" viewBox="0 0 ${picture.width} ${picture.height}" role="img" aria-labelledby="title summary">`,
    `<title id="title">${escapeXml(picture.title)}</title>`,
    `<desc id="summary">${escapeXml(picture.summary)}</desc>`,
    `<style>${rules}</style>`,
    `<rect width="${picture.width}" height="${picture.height}" fill="${theme.well}"/>`,
    body,
    '</svg>',
    '',
  ].join('\n')
}

function groupSvg(group: MarkGroup, theme: PictureTheme, styles: Map<string, string>): string {
  const name = group.of === 'node' ? `<title>${escapeXml(group.label)}</title>` : ''
  return `<g>${name}${group.marks.map((mark) => markSvg(mark, theme, styles)).join('')}</g>`
}

function markSvg(mark: Mark, theme: PictureTheme, styles: Map<string, string>): string {
  const rule = ruleOf(styleOf(mark.role, mark.tone), theme)
  const name = styles.get(rule) ?? `m${styles.size + 1}`
  styles.set(rule, name)
  switch (mark.kind) {
    case 'path':
      return `<path class="${name}" d="${mark.d}"/>`
    case 'polygon':
      return `<polygon class="${name}" points="${pointList(mark.points)}"/>`
    case 'circle':
      return `<circle class="${name}" cx="${coordinate(mark.center.x)}" cy="${coordinate(mark.center.y)}" r="${coordinate(mark.radius)}"/>`
    case 'text':
      return `<text class="${name}" x="${coordinate(mark.at.x)}" y="${coordinate(mark.at.y)}" text-anchor="${mark.anchor}" textLength="${coordinate(mark.width)}" lengthAdjust="spacingAndGlyphs">${escapeXml(mark.text)}</text>`
  }
}

/** Points as SVG lists them. */
export function pointList(points: readonly MarkPoint[]): string {
  return points.map(({ x, y }) => `${coordinate(x)},${coordinate(y)}`).join(' ')
}

function ruleOf({ fill, stroke, strokeWidth, dash, font }: MarkStyle, theme: PictureTheme): string {
  const colour = (name: PictureColour | 'none'): string => (name === 'none' ? 'none' : theme[name])
  const parts = [`fill:${colour(fill)}`]
  if (stroke !== 'none') parts.push(`stroke:${colour(stroke)}`, `stroke-width:${strokeWidth}`, 'stroke-linejoin:miter', 'stroke-linecap:butt')
  if (dash !== undefined) parts.push(`stroke-dasharray:${dash}`)
  if (font !== undefined) {
    parts.push(`font:${font.weight} ${font.size}px ${familyOf[font.face]}`)
    if (font.tracking !== 0) parts.push(`letter-spacing:${font.tracking}em`)
    if (font.face === 'mono') parts.push('font-variant-numeric:tabular-nums')
  }
  return parts.join(';')
}
