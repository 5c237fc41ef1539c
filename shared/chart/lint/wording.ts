import { units } from '#shared/units/quantities.ts'
import type { ChartNode, Outcome } from '../document.ts'
import { isDecision, type ChartIndex } from '../graph.ts'
import { nameOf, outcomeName, type Rule } from './context.ts'
import { remark, type Remark } from './remark.ts'

/** Most words of a sentence that says what to do, and of an outcome. */
const mostStepWords = 20
const mostOutcomeWords = 4

const letterOrDigit = /[\p{L}\p{N}]/u

/** Steps are short, outcomes are named in words of their own, and every node that makes a page has a title. */
export const wording: Rule = function* ({ index }) {
  for (const node of index.nodes.values()) {
    if (needsTitle(node) && (node.title ?? '').trim() === '')
      yield remark('title-missing', { node: node.id }, `Node ${node.id} has no title. Say in a few words what is done or asked.`)
    for (const text of [node.kind === 'step' ? node.title : undefined, node.do, node.kind === 'proof' ? node.change : undefined]) {
      if (text !== undefined && mayExceed(text, mostStepWords)) yield* stepWording(index, node, text)
    }
    if (isDecision(node)) for (const outcome of node.outcomes) yield* outcomeWording(index, node, outcome)
  }
}

function* stepWording(index: ChartIndex, node: ChartNode, text: string): Iterable<Remark> {
  for (const sentence of sentences(text)) {
    const count = wordCount(sentence)
    if (count <= mostStepWords) continue
    const words = `A step of ${nameOf(index, node)} has ${count} words: "${shorten(sentence)}". Say it in ${mostStepWords}, or make it two steps.`
    yield remark('step-too-long', { node: node.id }, words)
  }
}

function* outcomeWording(index: ChartIndex, node: ChartNode, outcome: Outcome): Iterable<Remark> {
  const { title } = outcome
  const count = mayExceed(title, mostOutcomeWords) ? wordCount(title) : 0
  const isEmpty = !letterOrDigit.test(title) || saysNothing(title)
  if (count <= mostOutcomeWords && !isEmpty) return
  const at = { node: node.id, edge: { from: node.id, outcome: outcome.id } }
  const name = `Outcome ${outcomeName(outcome)} of ${nameOf(index, node)}`
  if (count > mostOutcomeWords) yield remark('outcome-title-too-long', at, `${name} has ${count} words. Say it in ${mostOutcomeWords}.`)
  if (isEmpty) yield remark('outcome-says-nothing', at, `${name} does not say what was found. Name what is seen, heard or felt.`)
}

function saysNothing(title: string): boolean {
  return /^(?:o\.?k\.?|okay|checked|done|other|else|anything else)[.!]?$/i.test(title.trim()) || /\botherwise\b/i.test(title)
}

/** Values are ranges with a unit on one line, and no condition ties AND to OR. */
export const values: Rule = function* ({ index, chart }) {
  for (const node of index.nodes.values()) yield* valueWording({ node: node.id }, () => nameOf(index, node), nodeTexts(node))
  for (const { hazard, consequence, avoid } of chart.cautions ?? []) yield* valueWording({}, () => `caution "${shorten(hazard)}"`, [hazard, consequence, avoid])
  for (const { title, trap } of chart.access ?? []) yield* valueWording({}, () => `access "${title}"`, [title, trap])
  for (const { title, advice, remedy } of chart.library.causes ?? []) yield* valueWording({}, () => `cause "${title}"`, [title, advice, remedy?.text])
  for (const { title } of chart.library.serviceItems ?? []) yield* valueWording({}, () => `service item "${title}"`, [title])
}

/** Nothing that these rules look for can be in a text without one of these. */
const suspicious = /[\d±+,]/
const vague = /\b(?:about|approx\.?|approximately|roughly|circa)\s+\d[\d.,]*/i
const plusMinus = /±|\+\s?\/?\s?[-−–]\s?\d/
const torn = new RegExp(
  `\\d[ \\t]*\\r?\\n\\s*(?:${[...units, 'rpm', 'min', 'cm', 'm'].map((unit) => unit.replaceAll('/', '\\/')).join('|')})(?![\\p{L}\\p{N}])`,
  'u',
)

function* valueWording(at: { readonly node?: ChartNode['id'] }, whereOf: () => string, texts: readonly (string | undefined)[]): Iterable<Remark> {
  for (const text of texts) {
    if (text === undefined || !suspicious.test(text)) continue
    const found = vague.exec(text)
    if (found !== null) yield remark('vague-value', at, `In ${whereOf()} a value reads "${found[0]}". Give a range with its unit, as "2700 to 3100 rpm".`)
    if (plusMinus.test(text))
      yield remark('plus-minus', at, `In ${whereOf()} a value is written with plus and minus. Write the range out, as "2700 to 3100 rpm".`)
    if (torn.test(text)) yield remark('value-torn-from-unit', at, `In ${whereOf()} a line breaks between a value and its unit. Keep them on one line.`)
    for (const condition of conditions(text)) {
      if (/\band\b/i.test(condition) && /\bor\b/i.test(condition))
        yield remark('and-with-or', at, `In ${whereOf()} one condition uses both "and" and "or": "${shorten(condition)}". Make it a list, or two checks.`)
    }
  }
}

/** Clauses that begin with "if" or the like and end at a comma, before what is to be done; "between a and b" ties nothing. */
function conditions(text: string): string[] {
  return [...text.matchAll(/\b(?:if|when|unless|while|until)\b[^,.;:!?\n]{0,300},/gi)].map(([clause]) => clause.replace(/\bbetween\b.*?\band\b/gi, 'between'))
}

function needsTitle(node: ChartNode): boolean {
  return isDecision(node) || node.kind === 'step' || node.kind === 'start'
}

function nodeTexts(node: ChartNode): readonly (string | undefined)[] {
  const texts = [node.title, node.do, node.good, node.why, node.timer?.missed, node.kind === 'proof' ? node.change : undefined]
  if (isDecision(node)) for (const outcome of node.outcomes) texts.push(outcome.title, outcome.seen)
  return texts
}

function sentences(text: string): string[] {
  return text.split(/[.!?;](?:\s|$)|\n/).filter((sentence) => sentence.trim() !== '')
}

/** Words are what stands between blanks and holds a letter or a digit. */
function wordCount(text: string): number {
  return text.split(/\s+/).filter((word) => letterOrDigit.test(word)).length
}

/** Whether a text may hold more words than that at all: each takes a letter and a blank. */
function mayExceed(text: string, words: number): boolean {
  return text.length > 2 * words
}

function shorten(text: string): string {
  const trimmed = text.trim()
  return trimmed.length > 60 ? `${trimmed.slice(0, 60)}…` : trimmed
}
