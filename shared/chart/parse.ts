import type { z } from 'zod'
import { err, ok, type Result } from '#shared/lib/result.ts'
import { chartDocumentSchema, currentFormatVersion, type ChartDocument } from './document.ts'
import { migrate } from './migrations/steps.ts'
import { toFieldProblem, type FieldProblem } from './parse-words.ts'

/** Why a file is no chart that this program can read. `errors` name each field at fault, at most `mostErrors` of them. */
export type ChartProblem = {
  readonly code: 'not-a-chart' | 'too-new' | 'invalid'
  readonly detail: string
  readonly errors: readonly FieldProblem[]
}

/** Most faults that one problem lists; a file with more is told so in `detail`. */
export const mostErrors = 50

/**
 * The one door for a stored or uploaded chart: recognises it, migrates it step by step to the current format version,
 * checks it, and only then gives it a type. Whether the chart makes sense is the chart check's business (`lintChart`).
 * Never throws; the argument stays untouched and nothing of it is shared with an object that carries foreign keys.
 */
export function parseChart(json: unknown): Result<ChartDocument, ChartProblem> {
  if (!isRecord(json) || json['format'] !== 'pullcord-chart') return err(notAChart(json))
  const version = json['formatVersion']
  if (typeof version !== 'number' || !Number.isInteger(version) || version < 1) {
    const detail = `"formatVersion" must be a whole number; this Pullcord writes ${currentFormatVersion}.`
    return err({ code: 'invalid', detail, errors: [{ pointer: '#/formatVersion', detail }] })
  }
  if (version > currentFormatVersion) {
    const detail = `This chart has format version ${version}; this Pullcord reads up to version ${currentFormatVersion}. Update Pullcord, or export the chart again from the older one.`
    return err({ code: 'too-new', detail, errors: [{ pointer: '#/formatVersion', detail }] })
  }
  const current = migrate(json, version)
  const parsed = chartDocumentSchema.safeParse(current)
  return parsed.success ? ok(parsed.data) : err(invalid(parsed.error.issues, current))
}

/** `parseChart` for the text of a file. Text that is not JSON is refused as `not-a-chart`, with the line where it goes wrong. */
export function parseChartText(text: string): Result<ChartDocument, ChartProblem> {
  let json: unknown
  try {
    json = JSON.parse(text.startsWith('\uFEFF') ? text.slice(1) : text)
  } catch (cause) {
    const detail =
      text.trim() === ''
        ? 'This file is empty. Choose a chart file, exported as JSON.'
        : `This file is not JSON${whereIn(text, cause)}. Choose a chart file, exported as JSON.`
    return err({ code: 'not-a-chart', detail, errors: [{ pointer: '#', detail }] })
  }
  return parseChart(json)
}

function isRecord(json: unknown): json is Readonly<Record<string, unknown>> {
  return typeof json === 'object' && json !== null && !Array.isArray(json)
}

function notAChart(json: unknown): ChartProblem {
  const detail = isRecord(json)
    ? '"format" must be "pullcord-chart". This JSON is something other than a chart.'
    : 'A chart is a JSON object with "format": "pullcord-chart". This JSON is something else.'
  return { code: 'not-a-chart', detail, errors: [{ pointer: isRecord(json) ? '#/format' : '#', detail }] }
}

function invalid(issues: readonly z.core.$ZodIssue[], json: unknown): ChartProblem {
  const errors = issues.slice(0, mostErrors).map((issue) => toFieldProblem(issue, json))
  const first = errors[0]?.detail ?? 'The chart could not be read.'
  const more = issues.length - 1
  return { code: 'invalid', detail: more > 0 ? `${first} (and ${more} more)` : first, errors }
}

/** Every engine words its syntax errors in its own way; the place is taken where one is told, else left out. */
function whereIn(text: string, cause: unknown): string {
  const message = cause instanceof Error ? cause.message : ''
  const line = /line (\d+)/.exec(message)?.[1]
  if (line !== undefined) return `: something is wrong at line ${line}`
  const position = /position (\d+)/.exec(message)?.[1]
  if (position !== undefined) return `: something is wrong at line ${lineAt(text, Number(position))}`
  const quoted = /^Unexpected token '(.+)', (\.\.\.)?"([^]*)"(?:\.\.\.)? is not valid JSON$/u.exec(message)
  if (quoted !== null) {
    const [, token = '', cut, excerpt = ''] = quoted
    const start = text.indexOf(excerpt)
    if (start !== -1) return `: something is wrong at line ${lineAt(text, start + Math.max(0, excerpt.indexOf(token, cut === undefined ? 0 : 10)))}`
  }
  if (/end of (JSON|data|input)|EOF|Unterminated/i.test(message)) return `: it breaks off at line ${lineAt(text, text.length)}`
  return ''
}

function lineAt(text: string, position: number): number {
  let line = 1
  for (let at = text.indexOf('\n'); at !== -1 && at < position; at = text.indexOf('\n', at + 1)) line += 1
  return line
}
