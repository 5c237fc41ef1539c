import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { pictureColours } from './mark-style.ts'
import { drawChart } from './chart-picture.ts'
import { escapeXml, pictureThemes, toSvg } from './svg.ts'
import { buildChart, cause, check, proof, reproducing, soundSketch, start } from '#tests/support/chart-builder.ts'

describe('an SVG file of a chart', () => {
  test('escapes hostile words in every place where they can stand', () => {
    const evil = `</text><script>alert('x')</script>"&<\u0000\ud800`
    const chart = buildChart({
      title: evil,
      nodes: [
        start('s', { title: evil }),
        reproducing('n1', { title: evil }),
        check('n2', [{ id: 'good', title: evil, normal: true }, { id: 'bad', title: evil }], { title: evil }),
        proof('p2', 'x', { title: evil }),
        cause('c2', 'x', { title: evil }),
      ],
      causes: [{ id: 'x', title: evil, system: 'fuel' }],
      edges: ['s > n1', 'n1.yes > n2', 'n2.bad > p2', 'p2.gone > c2'],
    })
    const svg = toSvg(drawChart(chart, { outcomes: 'listed' }), pictureThemes.light)
    expect(svg).not.toMatch(/<script|alert\('|\u0000|\ud800/)
    expect(svg.replaceAll(/<\/?(svg|title|desc|style|g|path|polygon|circle|text|rect)(\s[^<>]*)?>/g, '')).not.toMatch(/[<>]/)
    expect(svg).toContain('&lt;/text&gt;&lt;script&gt;')
  })

  test('refers to nothing outside itself', () => {
    const svg = toSvg(drawChart(buildChart(soundSketch)), pictureThemes.dark)
    expect(svg.replace('http://www.w3.org/2000/svg', '')).not.toMatch(/https?:|url\(|href|@import/)
  })

  test('is the same text for the same chart', () => {
    const draw = (): string => toSvg(drawChart(buildChart(soundSketch)), pictureThemes.print)
    expect(draw()).toBe(draw())
  })
})

test('whole characters outside the first plane are kept', () => {
  expect(escapeXml('🪚 <')).toBe('🪚 &lt;')
})

test('the colours of a file are those of the screens', () => {
  const css = readFileSync(new URL('../../src/styles/tokens.css', import.meta.url), 'utf8')
  const blocks = { light: css.slice(css.indexOf(':root {')), dark: css.slice(css.indexOf('@variant dark {', css.indexOf(':root {'))) }
  for (const [name, block] of Object.entries(blocks)) {
    for (const colour of pictureColours) {
      const value = new RegExp(`--${colour}: (#[0-9a-f]{6});`).exec(block)?.[1]
      expect(pictureThemes[name as 'light' | 'dark'][colour], `${name} ${colour}`).toBe(value)
    }
  }
})
