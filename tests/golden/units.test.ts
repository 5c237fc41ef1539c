import { describe, expect, test } from 'vitest'
import type { ChartDocument, ReadingNode } from '#shared/chart/document.ts'
import { chartDocumentSchema, nodeSchema } from '#shared/chart/document.ts'
import { judgeReading, limitsOf, limitWords } from '#shared/chart/judge.ts'
import { specLimitsFor } from '#shared/chart/spec-limits.ts'
import { fitsHarm, highestWord } from '#shared/trade/signal-words.ts'
import { convertValue } from '#shared/units/convert.ts'
import { roundTo } from '#shared/units/format-value.ts'
import { isMixRight, mixRatio, oilFor } from '#shared/units/mix.ts'
import { defaultNumberFormat } from '#shared/units/number-format.ts'

function reading(fields: object): ReadingNode {
  const node = nodeSchema.parse({ id: 'r', kind: 'reading', title: 'Reading', ...fields })
  if (node.kind !== 'reading') throw new Error('A reading was asked for.')
  return node
}

/** The outcome for a value when the limits are those that the node itself states. */
function judged(node: ReadingNode, value: number, unit = node.unit): string | null {
  return judgeReading(node, limitsOf(node, {}, []), value, unit)
}

const inLimits = [
  { outcome: 'low', to: 'min' },
  { outcome: 'in', from: 'min', fromIncluded: true, to: 'max', toIncluded: true },
  { outcome: 'high', from: 'max' },
]
const lowInHigh = [
  { id: 'low', title: 'Low' },
  { id: 'in', title: 'In limits', normal: true },
  { id: 'high', title: 'High' },
]

describe('factors of NIST Special Publication 811, 2008, appendix B.8 (digits from memory, psi and inHg confirmed in a printed table)', () => {
  test.each([
    ['psi', 'kPa', 6.894757, 6],
    ['psi', 'bar', 0.06894757, 8],
    ['inHg', 'kPa', 3.386389, 6],
    ['in', 'mm', 25.4, 6],
    ['US fl oz', 'ml', 29.57353, 5],
    ['US gal', 'l', 3.785412, 6],
    ['ft-lbf', 'N m', 1.355818, 6],
    ['lb', 'g', 453.5924, 4],
  ] as const)('1 %s in %s is %d', (from, to, printed, digits) => {
    expect(roundTo(convertValue(1, from, to) ?? Number.NaN, digits)).toBe(printed)
  })

  test('an inch is 25.4 mm exactly, and water boils at 212 degF and 100 degC', () => {
    expect(convertValue(1, 'in', 'mm')).toBe(25.4)
    expect(convertValue(212, 'degF', 'degC')).toBe(100)
    expect(convertValue(0, 'degC', 'degF')).toBe(32)
  })
})

describe('two-stroke mix: oil = fuel / ratio (own arithmetic; the 50:1 and 32:1 rows after a public reference table of fuel mixes, no year given)', () => {
  test.each([
    // ratio, US fl oz to a US gal, ml to a litre, ml to 5 l
    [50, 2.56, 20, 100],
    [40, 3.2, 25, 125],
    [32, 4, 31.25, 156.25],
    [25, 5.12, 40, 200],
    [16, 8, 62.5, 312.5],
  ])('%d:1', (ratio, fluidOunces, perLitre, perFiveLitres) => {
    const gallonInFluidOunces = convertValue(1, 'US gal', 'US fl oz') ?? Number.NaN
    expect(oilFor(gallonInFluidOunces, ratio)).toBe(fluidOunces)
    expect(oilFor(convertValue(1, 'l', 'ml') ?? Number.NaN, ratio)).toBe(perLitre)
    expect(oilFor(5000, ratio)).toBe(perFiveLitres)
  })

  test('2.6 US fl oz to a gallon is really 49.2:1, and right within 3 %', () => {
    expect(roundTo(mixRatio(128, 2.6) ?? Number.NaN, 1)).toBe(49.2)
    expect(isMixRight(128, 2.6, 50)).toBe(true)
    expect(isMixRight(128, 3.2, 50)).toBe(false)
    expect(isMixRight(5000, 103, 50)).toBe(true)
    expect(isMixRight(5000, 97, 50)).toBe(true)
    expect(isMixRight(5000, 103.01, 50)).toBe(false)
  })

  test('no oil, no fuel and nonsense are no mix', () => {
    expect(mixRatio(5000, 0)).toBeNull()
    expect(oilFor(-1, 50)).toBeNull()
    expect(oilFor(5000, 0)).toBeNull()
    expect(isMixRight(5000, Number.NaN, 50)).toBe(false)
  })
})

describe('crankcase leak test: 7 psi for 10 s ("How to leak-check a chainsaw", Northern Woodlands, no year shown; the hold from a page on two-cycle leak tests)', () => {
  test('7 psi is 48.26 kPa and 0.483 bar (NIST SP 811, 2008, B.8)', () => {
    expect(roundTo(convertValue(7, 'psi', 'kPa') ?? Number.NaN, 2)).toBe(48.26)
    expect(roundTo(convertValue(7, 'psi', 'bar') ?? Number.NaN, 3)).toBe(0.483)
  })

  const drop = reading({
    quantity: 'pressure',
    unit: 'psi',
    timer: { seconds: 10, rule: 'at-least' },
    limits: { max: 0 },
    outcomes: [
      { id: 'holds', title: 'Holds', normal: true },
      { id: 'drops', title: 'Drops' },
    ],
    bands: [
      { outcome: 'holds', to: 'max', toIncluded: true },
      { outcome: 'drops', from: 'max' },
    ],
  })

  test('it passes only without any drop', () => {
    expect(judged(drop, 0)).toBe('holds')
    expect(judged(drop, 0, 'kPa')).toBe('holds')
    expect(judged(drop, 0.1)).toBe('drops')
    expect(judged(drop, 0.001, 'bar')).toBe('drops')
  })
})

describe('compression', () => {
  test('90 psi is 620.5 kPa and 6.21 bar (NIST SP 811, 2008, B.8)', () => {
    expect(roundTo(convertValue(90, 'psi', 'kPa') ?? Number.NaN, 1)).toBe(620.5)
    expect(roundTo(convertValue(90, 'psi', 'bar') ?? Number.NaN, 2)).toBe(6.21)
  })

  const chart: ChartDocument = chartDocumentSchema.parse({
    format: 'pullcord-chart',
    formatVersion: 1,
    id: 'compression',
    title: 'Compression',
    library: {
      specKeys: [
        {
          id: 'compression',
          title: 'Compression',
          quantity: 'pressure',
          unit: 'psi',
          general: [
            // under about 90 psi is suspect on a two-stroke: from memory, common practice
            { engines: ['two-stroke'], min: 90, source: { mark: 'from memory' } },
            // most small four-strokes read 60 to 75 psi: "Basic Engine Testing", a public how-to page, no year
            { engines: ['four-stroke'], min: 60, source: { mark: 'read', title: 'Basic Engine Testing' } },
          ],
        },
      ],
    },
    nodes: [
      {
        id: 'n12',
        kind: 'reading',
        title: 'Compression, throttle open',
        quantity: 'pressure',
        unit: 'psi',
        limits: { spec: 'compression' },
        outcomes: lowInHigh.slice(0, 2),
        bands: [
          { outcome: 'low', to: 'min' },
          { outcome: 'in', from: 'min', fromIncluded: true },
        ],
      },
    ],
    edges: [],
  })
  const [node] = chart.nodes
  const compression = (engine: 'two-stroke' | 'four-stroke', value: number, unit: 'psi' | 'kPa' | 'bar' = 'psi'): string | null => {
    if (node?.kind !== 'reading') throw new Error('The chart holds one reading.')
    const machine = { class: 'chain-saw', engine } as const
    return judgeReading(node, limitsOf(node, specLimitsFor([chart], machine, null), []), value, unit)
  }

  test('80 psi is low for a two-stroke ("How to leak-check a chainsaw", Northern Woodlands, no year shown)', () => {
    expect(compression('two-stroke', 80)).toBe('low')
    expect(compression('two-stroke', 90)).toBe('in')
    expect(compression('two-stroke', 620, 'kPa')).toBe('low')
    expect(compression('two-stroke', 6.21, 'bar')).toBe('in')
  })

  test('60 to 75 psi is as it should be for a small four-stroke with a release ("Basic Engine Testing", no year)', () => {
    for (const value of [60, 68, 75]) expect(compression('four-stroke', value)).toBe('in')
    expect(compression('four-stroke', 24)).toBe('low')
  })
})

describe('gap from coil to flywheel: 0.010 to 0.014 in (tractor owners\' forum, trade practice; 0.010 in the least)', () => {
  const gap = reading({ quantity: 'length', unit: 'in', limits: { min: 0.01, max: 0.014 }, outcomes: lowInHigh, bands: inLimits })

  test('that is 0.254 to 0.356 mm (an inch is 25.4 mm exactly: NIST SP 811, 2008, B.8)', () => {
    expect(convertValue(0.01, 'in', 'mm')).toBe(0.254)
    expect(roundTo(convertValue(0.014, 'in', 'mm') ?? Number.NaN, 3)).toBe(0.356)
    expect(limitWords({ min: 0.01, max: 0.014, unit: 'in' }, 'mm', defaultNumberFormat)).toBe('0.254 to 0.3556\u00a0mm')
  })

  test('0.009 fails, 0.012 passes, and both ends pass in either unit', () => {
    expect(judged(gap, 0.009)).toBe('low')
    expect(judged(gap, 0.012)).toBe('in')
    expect(judged(gap, 0.01)).toBe('in')
    expect(judged(gap, 0.014)).toBe('in')
    expect(judged(gap, 0.254, 'mm')).toBe('in')
    expect(judged(gap, 0.3556, 'mm')).toBe('in')
    expect(judged(gap, 0.253, 'mm')).toBe('low')
    expect(judged(gap, 0.36, 'mm')).toBe('high')
  })
})

describe('openings of an arrester screen: at most 0.0232 in, printed as 0.584 mm (California Code of Regulations, title 14, section 1242)', () => {
  const opening = reading({
    quantity: 'length',
    unit: 'in',
    limits: { as: [{ max: 0.0232, unit: 'in' }, { max: 0.584, unit: 'mm' }] },
    outcomes: lowInHigh.slice(1),
    bands: [
      { outcome: 'in', to: 'max', toIncluded: true },
      { outcome: 'high', from: 'max' },
    ],
  })

  test('each figure is judged as printed, though 0.0232 in computes to 0.589 mm', () => {
    expect(roundTo(convertValue(0.0232, 'in', 'mm') ?? Number.NaN, 3)).toBe(0.589)
    expect(judged(opening, 0.0232, 'in')).toBe('in')
    expect(judged(opening, 0.584, 'mm')).toBe('in')
    expect(judged(opening, 0.585, 'mm')).toBe('high')
    expect(judged(opening, 0.589, 'mm')).toBe('high')
    expect(judged(opening, 0.0233, 'in')).toBe('high')
  })

  test('both figures are kept and said as they were printed', () => {
    const limits = limitsOf(opening, {}, [])
    expect(limits).toEqual({ as: [{ max: 0.0232, unit: 'in' }, { max: 0.584, unit: 'mm' }] })
    expect(limits && limitWords(limits, 'mm', defaultNumberFormat)).toBe('at most 0.584\u00a0mm')
    expect(limits && limitWords(limits, 'in', defaultNumberFormat)).toBe('at most 0.0232\u00a0in')
  })
})

describe('compressed air for cleaning: less than 30 psi (29 CFR 1910.242(b))', () => {
  const air = reading({
    quantity: 'pressure',
    unit: 'psi',
    limits: { max: 30 },
    outcomes: lowInHigh.slice(1),
    bands: [
      { outcome: 'in', to: 'max' },
      { outcome: 'high', from: 'max', fromIncluded: true },
    ],
  })

  test('29 psi is allowed, 30 psi is not, in any unit', () => {
    expect(judged(air, 29)).toBe('in')
    expect(judged(air, 30)).toBe('high')
    expect(judged(air, 29.99)).toBe('in')
    expect(judged(air, 206.8, 'kPa')).toBe('in')
    expect(judged(air, 206.9, 'kPa')).toBe('high')
    expect(roundTo(convertValue(30, 'psi', 'kPa') ?? Number.NaN, 1)).toBe(206.8)
  })
})

describe('signal words (ANSI Z535.4-2007, 4.14)', () => {
  test('damage alone is a NOTICE and nothing higher', () => {
    expect(fitsHarm('NOTICE', 'damage')).toBe(true)
    for (const word of ['DANGER', 'WARNING', 'CAUTION'] as const) expect(fitsHarm(word, 'damage')).toBe(false)
  })

  test('what could kill or maim is at least a WARNING', () => {
    for (const harm of ['death', 'serious-injury'] as const) {
      expect(fitsHarm('WARNING', harm)).toBe(true)
      expect(fitsHarm('DANGER', harm)).toBe(true)
      expect(fitsHarm('CAUTION', harm)).toBe(false)
      expect(fitsHarm('NOTICE', harm)).toBe(false)
    }
    expect(fitsHarm('CAUTION', 'minor-injury')).toBe(true)
  })

  test('several hazards stand under the highest word, once', () => {
    expect(highestWord(['NOTICE', 'WARNING', 'CAUTION', 'WARNING'])).toBe('WARNING')
    expect(highestWord(['CAUTION', 'DANGER'])).toBe('DANGER')
    expect(highestWord([])).toBeNull()
  })
})
