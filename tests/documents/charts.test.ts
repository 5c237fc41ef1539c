import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { describe, expect, test } from 'vitest'
import { toChartSet } from '#shared/chart/chart-set.ts'
import { currentFormatVersion } from '#shared/chart/document.ts'
import { hasErrors, lintChart } from '#shared/chart/lint/lint-chart.ts'
import { migrationSteps } from '#shared/chart/migrations/steps.ts'
import { parseChartText } from '#shared/chart/parse.ts'

const texts = readdirSync(import.meta.dirname)
  .filter((name) => name.endsWith('.json'))
  .map((name) => readFileSync(join(import.meta.dirname, name), 'utf8'))
  .filter((text) => text.includes('"pullcord-chart"'))

/** Charts kept as they were stored once: whatever changes in the format, they are read. */
describe('frozen charts', () => {
  const charts = texts.map((text) => {
    const parsed = parseChartText(text)
    if (!parsed.ok) throw new Error(parsed.error.detail)
    return parsed.value
  })

  test('are read by today’s door, and have nothing that must be fixed', () => {
    const set = toChartSet(charts)
    for (const index of set.values()) expect(hasErrors(lintChart(index, { others: (id) => set.get(id) }))).toBe(false)
  })

  test('every format version has one, so that every migration step is run', () => {
    const versions = new Set(texts.map((text) => (JSON.parse(text) as { formatVersion: number }).formatVersion))
    expect([...versions].sort()).toEqual(Array.from({ length: currentFormatVersion }, (_, index) => index + 1))
    expect(migrationSteps).toHaveLength(currentFormatVersion - 1)
  })
})
