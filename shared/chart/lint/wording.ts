import { units } from '#shared/units/quantities.ts'
import type { ChartNode } from '../document.ts'
import { isDecision } from '../graph.ts'
import { nameOf, outcomeName, type LintContext, type Rule } from './context.ts'
import { remark, type Remark } from './remark.ts'

/** Most words of a sentence that says what to do, and of an outcome. */
const mostStepWords = 20
const mostOutcomeWords = 4

/** Steps are short, outcomes are named in words of their own, and every node that makes a page has a title. */
export const wording: Rule = function* ({ index }) {
  for (const node of index.nodes.values()) {
    if (needsTitle(node) && (node.title ?? '').trim() === '')
      yield remark('title-missing', { node: node.id }, `Node ${node.id} has no title. Say in a few words what is done or asked.`)
    for (const sentence of toDo(node).flatMap(sentences)) {
      const count = wordCount(sentence)
      if (count > mostStepWords)
        yield remark(
          'step-too-long',
          { node: node.id },
          `A step of ${nameOf(index, node)} has ${count} words: "${shorten(sentence)}". Say it in ${mostStepWords}, or make it two steps.`,
        )
    }
    if (isDecision(node)) for (const outcome of node.outcomes) yield* outcomeWording(index, node, outcome)
  }
}

function* outcomeWording(
  index: LintContext['index'],
  node: ChartNode,
  outcome: { id: string; title: string } & Parameters<typeof outcomeName>[0],
): Iterable<Remark> {
  const at = { node: node.id, edge: { from: node.id, outcome: outcome.id } }
  const count = wordCount(outcome.title)
  if (count > mostOutcomeWords)
    yield remark('outcome-title-too-long', at, `Outcome ${outcomeName(outcome)} of ${nameOf(index, node)} has ${count} words. Say it in ${mostOutcomeWords}.`)
  if (count === 0 || saysNothing(outcome.title))
    yield remark(
      'outcome-says-nothing',
      at,
      `Outcome ${outcomeName(outcome)} of ${nameOf(index, node)} does not say what was found. Name what is seen, heard or felt.`,
    )
}

function saysNothing(title: string): boolean {
  return /^(?:o\.?k\.?|okay|checked|done|other|else|anything else)[.!]?$/i.test(title.trim()) || /\botherwise\b/i.test(title)
}

/** Values are ranges with a unit on one line, and no condition ties AND to OR. */
export const values: Rule = function* ({ index, chart }) {
  for (const node of index.nodes.values()) for (const text of nodeTexts(node)) yield* valueWording({ node: node.id }, nameOf(index, node), text)
  for (const caution of chart.cautions ?? [])
    for (const text of [caution.hazard, caution.consequence, caution.avoid]) yield* valueWording({}, `caution "${shorten(caution.hazard)}"`, text)
  for (const access of chart.access ?? []) for (const text of [access.title, access.trap]) yield* valueWording({}, `access "${access.title}"`, text)
  for (const cause of chart.library.causes ?? [])
    for (const text of [cause.title, cause.advice, cause.remedy?.text]) yield* valueWording({}, `cause "${cause.title}"`, text)
  for (const item of chart.library.serviceItems ?? []) yield* valueWording({}, `service item "${item.title}"`, item.title)
}

const vague = /\b(?:about|approx\.?|approximately|roughly|circa)\s+\d[\d.,]*/i
const plusMinus = /±|\+\s?\/?\s?[-−–]\s?\d/
const torn = new RegExp(
  `\\d[ \\t]*\\r?\\n\\s*(?:${[...units, 'rpm', 'min', 'cm', 'm'].map((unit) => unit.replaceAll('/', '\\/')).join('|')})(?![\\p{L}\\p{N}])`,
  'u',
)

function* valueWording(at: { readonly node?: ChartNode['id'] }, where: string, text: string | undefined): Iterable<Remark> {
  if (text === undefined || text === '') return
  const found = vague.exec(text)
  if (found !== null) yield remark('vague-value', at, `In ${where} a value reads "${found[0]}". Give a range with its unit, as "2700 to 3100 rpm".`)
  if (plusMinus.test(text)) yield remark('plus-minus', at, `In ${where} a value is written with plus and minus. Write the range out, as "2700 to 3100 rpm".`)
  if (torn.test(text)) yield remark('value-torn-from-unit', at, `In ${where} a line breaks between a value and its unit. Keep them on one line.`)
  for (const condition of conditions(text)) {
    if (/\band\b/i.test(condition) && /\bor\b/i.test(condition))
      yield remark('and-with-or', at, `In ${where} one condition uses both "and" and "or": "${shorten(condition)}". Make it a list, or two checks.`)
  }
}

/** Clauses that begin with "if" or the like and end at a comma, before what is to be done; "between a and b" ties nothing. */
function conditions(text: string): string[] {
  return [...text.matchAll(/\b(?:if|when|unless|while|until)\b[^,.;:!?\n]{0,300},/gi)].map(([clause]) => clause.replace(/\bbetween\b.*?\band\b/gi, 'between'))
}

function needsTitle(node: ChartNode): boolean {
  return isDecision(node) || node.kind === 'step' || node.kind === 'start'
}

/** What a node tells a person to do. */
function toDo(node: ChartNode): readonly string[] {
  return [node.kind === 'step' ? node.title : undefined, node.do, node.kind === 'proof' ? node.change : undefined].flatMap((text) => text ?? [])
}

function nodeTexts(node: ChartNode): readonly (string | undefined)[] {
  const own = [node.title, node.do, node.good, node.why, node.timer?.missed, node.kind === 'proof' ? node.change : undefined]
  return isDecision(node) ? [...own, ...node.outcomes.flatMap((outcome) => [outcome.title, outcome.seen])] : own
}

function sentences(text: string): string[] {
  return text.split(/[.!?;](?:\s|$)|\n/).filter((sentence) => sentence.trim() !== '')
}

function wordCount(text: string): number {
  return text.split(/\s+/).filter((word) => /[\p{L}\p{N}]/u.test(word)).length
}

function shorten(text: string): string {
  const trimmed = text.trim()
  return trimmed.length > 60 ? `${trimmed.slice(0, 60)}…` : trimmed
}
