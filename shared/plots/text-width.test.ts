import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { textWidth, wrapText } from './text-width.ts'

describe('width of a line', () => {
  test('adds up the advances of the font', () => {
    // H 651, o 506, l 268, d 544 thousandths
    expect(textWidth('Hold', 10)).toBeCloseTo(19.69, 10)
    expect(textWidth('9 850', 10, 'mono')).toBe(30)
    expect(textWidth('HOLD', 10, 'condensed', 0.1)).toBeCloseTo(textWidth('HOLD', 10) + 4, 10)
  })

  test('control characters and joiners take no room, other scripts take plenty', () => {
    expect(textWidth('\u0007\u200b', 10)).toBe(0)
    expect(textWidth('漢', 10)).toBeGreaterThan(10)
  })
})

describe('a text in lines', () => {
  test('breaks between words and keeps values with their units', () => {
    const lines = wrapText('Full speed, no load 11\u202f000 to 13\u202f500\u00a0rpm', { size: 15, width: 130, maxLines: 4 })
    expect(lines.length).toBeGreaterThan(1)
    expect(lines.some((line) => line.includes('13\u202f500\u00a0rpm'))).toBe(true)
    expect(lines.join(' ')).toBe('Full speed, no load 11\u202f000 to 13\u202f500\u00a0rpm')
  })

  test('is never wider than asked and never longer than asked, whatever it holds', () => {
    const text = fc.oneof(fc.string({ maxLength: 300 }), fc.string({ unit: 'grapheme', maxLength: 100 }), fc.constant('W'.repeat(200)))
    fc.assert(
      fc.property(text, fc.integer({ min: 40, max: 300 }), fc.integer({ min: 1, max: 5 }), (words, width, maxLines) => {
        const lines = wrapText(words, { size: 15, width, maxLines })
        expect(lines.length).toBeLessThanOrEqual(maxLines)
        for (const line of lines) if ([...line].length > 1) expect(textWidth(line, 15)).toBeLessThanOrEqual(width)
      }),
    )
  })

  test('says with an ellipsis that something is left out, and only then', () => {
    expect(wrapText('one two three four five six seven', { size: 15, width: 60, maxLines: 2 }).at(-1)).toMatch(/…$/)
    expect(wrapText('one two', { size: 15, width: 60, maxLines: 2 }).join(' ')).toBe('one two')
    expect(wrapText('  ', { size: 15, width: 60, maxLines: 2 })).toEqual([])
  })
})
