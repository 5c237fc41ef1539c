import { styleOf, type MarkStyle, type PictureColour } from '#shared/plots/mark-style.ts'
import { coordinate, type Mark, type Tone } from '#shared/plots/marks.ts'
import { familyOf, pointList } from '#shared/plots/svg.ts'

const colour = (name: PictureColour | 'none'): string => (name === 'none' ? 'none' : `var(--${name})`)

function paint({ fill, stroke, strokeWidth, dash, font }: MarkStyle) {
  return {
    fill: colour(fill),
    ...(stroke === 'none' ? {} : { stroke: colour(stroke), strokeWidth }),
    ...(dash === undefined ? {} : { strokeDasharray: dash }),
    ...(font === undefined
      ? {}
      : { fontFamily: familyOf[font.face], fontSize: font.size, fontWeight: font.weight, ...(font.tracking === 0 ? {} : { letterSpacing: `${font.tracking}em` }) }),
  }
}

/** One mark of a picture in the colours of the page's theme. */
export function MarkShape({ mark, tone = mark.tone }: { readonly mark: Mark; readonly tone?: Tone }) {
  const style = paint(styleOf(mark.role, tone))
  switch (mark.kind) {
    case 'path':
      return <path d={mark.d} {...style} />
    case 'polygon':
      return <polygon points={pointList(mark.points)} {...style} />
    case 'circle':
      return <circle cx={mark.center.x} cy={mark.center.y} r={mark.radius} {...style} />
    case 'text':
      return (
        <text x={coordinate(mark.at.x)} y={coordinate(mark.at.y)} textAnchor={mark.anchor} textLength={coordinate(mark.width)} lengthAdjust="spacingAndGlyphs" {...style}>
          {mark.text}
        </text>
      )
  }
}
