import { readFileSync } from 'node:fs'

import { describe, expect, test } from 'vitest'

/**
 * Every contrast that the look of the product promises, recomputed from the token file. Formula: WCAG 2.2 (W3C, 2023),
 * definitions of "relative luminance" and "contrast ratio"; figures are rounded down, so that none is promised too well.
 */
const source = readFileSync('src/styles/tokens.css', 'utf8')

type Theme = 'light' | 'dark' | 'strong' | 'strong-dark'
type Tokens = Readonly<Record<string, string>>

/** The declarations between a head and its closing brace, nested blocks left out. */
function readBlock(head: string): Tokens {
  const start = source.indexOf(head)
  if (start === -1) throw new Error(`tokens.css has no block "${head}"`)
  let depth = 0
  let own = ''
  for (const sign of source.slice(start + head.length - 1)) {
    if (sign === '{') depth += 1
    else if (sign === '}') depth -= 1
    else if (depth === 1) own += sign
    if (depth === 0) break
  }
  return Object.fromEntries([...own.matchAll(/--([\w-]+):\s*(#[0-9a-f]{6});/gi)].map(([, name = '', value = '']) => [name, value.toLowerCase()]))
}

const light = readBlock(':root {')
const themes: Readonly<Record<Theme, Tokens>> = {
  light,
  dark: { ...light, ...readBlock('@variant dark {') },
  strong: { ...light, ...readBlock('@variant strong {') },
  'strong-dark': { ...light, ...readBlock('@variant strong-dark {') },
}

function colourOf(theme: Theme, token: string): string {
  const colour = token.startsWith('#') ? token : themes[theme][token]
  if (colour === undefined) throw new Error(`no colour "${token}" in ${theme}`)
  return colour
}

function luminanceOf(colour: string): number {
  const [red = 0, green = 0, blue = 0] = [1, 3, 5].map((at) => {
    const share = Number.parseInt(colour.slice(at, at + 2), 16) / 255
    return share <= 0.04045 ? share / 12.92 : ((share + 0.055) / 1.055) ** 2.4
  })
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue
}

function contrastOf(theme: Theme, token: string, ground: string): number {
  const [one, other] = [luminanceOf(colourOf(theme, token)), luminanceOf(colourOf(theme, ground))]
  return (Math.max(one, other) + 0.05) / (Math.min(one, other) + 0.05)
}

const roundDown = (ratio: number): number => Math.floor(ratio * 10) / 10

/** Token, then its printed ratio on paper, card and well. */
const onGrounds: Readonly<Record<'light' | 'dark', readonly (readonly [string, number, number, number])[]>> = {
  light: [
    ['ink', 14.3, 15.7, 13.0],
    ['ink-2', 7.0, 7.7, 6.4],
    ['cord', 6.7, 7.3, 6.1],
    ['rule', 3.7, 4.0, 3.3],
    ['focus', 6.0, 6.6, 5.5],
    ['good', 5.1, 5.6, 4.6],
    ['bad', 7.1, 7.8, 6.5],
    ['care', 6.1, 6.7, 5.5],
    ['info', 7.5, 8.3, 6.8],
    ['open', 6.4, 7.0, 5.8],
  ],
  dark: [
    ['ink', 15.6, 13.9, 16.3],
    ['ink-2', 9.0, 8.1, 9.5],
    ['cord', 9.1, 8.1, 9.5],
    ['rule', 5.6, 5.0, 5.9],
    ['focus', 9.4, 8.4, 9.9],
  ],
}

/** Theme, token, ground, printed ratio. */
const onOthers: readonly (readonly [Theme, string, string, number])[] = [
  ['light', 'on-cord', 'cord', 7.5],
  ['dark', 'on-cord', 'cord', 9.1],
  ['light', 'ink', 'cord-wash', 12.7],
  ['light', 'cord', 'cord-wash', 6.0],
  ['dark', 'ink', 'cord-wash', 10.6],
  ['dark', 'cord', 'cord-wash', 6.2],
  ['light', 'good', 'good-wash', 4.7],
  ['light', 'bad', 'bad-wash', 6.3],
  ['light', 'care', 'care-wash', 5.7],
  ['light', 'info', 'info-wash', 6.7],
  ['dark', 'good', 'good-wash', 7.6],
  ['dark', 'bad', 'bad-wash', 6.2],
  ['dark', 'care', 'care-wash', 10.2],
  ['dark', 'info', 'info-wash', 7.7],
  ['light', 'on-danger-strip', 'danger-strip', 6.9],
  ['light', 'on-warning-strip', 'warning-strip', 6.9],
  ['light', 'on-caution-strip', 'caution-strip', 11.4],
  ['light', 'on-notice-strip', 'notice-strip', 7.9],
]

/** Dark states are promised as "this or more" on paper, card and well alike. */
const darkAtLeast: readonly (readonly [string, number])[] = [
  ['good', 9.0],
  ['bad', 7.0],
  ['care', 12.3],
  ['info', 8.8],
  ['open', 7.0],
]

const grounds = ['paper', 'card', 'well'] as const
const allThemes: readonly Theme[] = ['light', 'dark', 'strong', 'strong-dark']
const inks = ['ink', 'ink-2', 'cord', 'good', 'bad', 'care', 'info', 'open'] as const

describe('the printed ratios', () => {
  for (const theme of ['light', 'dark'] as const) {
    test.each(onGrounds[theme])(`${theme}: %s on paper, card and well`, (token, ...printed) => {
      expect(grounds.map((ground) => roundDown(contrastOf(theme, token, ground)))).toEqual(printed)
    })
  }

  test.each(onOthers)('%s: %s on %s is %f', (theme, token, ground, printed) => {
    expect(roundDown(contrastOf(theme, token, ground))).toBe(printed)
  })

  test.each(darkAtLeast)('dark: %s is at least %f on every ground', (token, least) => {
    for (const ground of grounds) expect(roundDown(contrastOf('dark', token, ground))).toBeGreaterThanOrEqual(least)
  })

  test('plot series stand out from the card: 3.3 or more in light, 5.8 or more in dark', () => {
    for (const series of ['series-1', 'series-2', 'series-3', 'series-4']) {
      expect(roundDown(contrastOf('light', series, 'card'))).toBeGreaterThanOrEqual(3.3)
      expect(roundDown(contrastOf('dark', series, 'card'))).toBeGreaterThanOrEqual(5.8)
    }
  })
})

describe('in every theme', () => {
  test.each(allThemes)('%s: text keeps 4.5 to 1 on every ground (WCAG 2.2, 1.4.3)', (theme) => {
    for (const ground of grounds) for (const ink of inks) expect(contrastOf(theme, ink, ground)).toBeGreaterThanOrEqual(4.5)
    expect(contrastOf(theme, 'on-cord', 'cord')).toBeGreaterThanOrEqual(4.5)
    expect(contrastOf(theme, 'ink', 'cord-wash')).toBeGreaterThanOrEqual(4.5)
    expect(contrastOf(theme, 'ink-2', 'cord-wash')).toBeGreaterThanOrEqual(4.5)
  })

  test.each(allThemes)('%s: borders, nodes and the focus ring keep 3 to 1 (WCAG 2.2, 1.4.11)', (theme) => {
    for (const ground of [...grounds, 'cord-wash']) {
      for (const line of ['rule', 'focus', 'cord']) expect(contrastOf(theme, line, ground)).toBeGreaterThanOrEqual(3)
    }
  })

  test('strong is black and white and nothing between', () => {
    for (const theme of ['strong', 'strong-dark'] as const) {
      const used = Object.entries(themes[theme])
        .filter(([name]) => !name.endsWith('-strip'))
        .map(([, colour]) => colour)
      expect([...new Set(used)].toSorted()).toEqual(['#000000', '#ffffff'])
    }
  })

  test('caution strips are the same in every theme', () => {
    for (const theme of allThemes) {
      for (const word of ['danger', 'warning', 'caution', 'notice']) expect(colourOf(theme, `${word}-strip`)).toBe(light[`${word}-strip`])
    }
  })
})
