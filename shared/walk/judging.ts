import type { DecisionNode, ReadingNode } from '#shared/chart/document.ts'
import { judgeReading, limitsOf } from '#shared/chart/judge.ts'
import type { OutcomeId } from '#shared/lib/ids.ts'
import { compareAmounts, convertValue } from '#shared/units/convert.ts'
import type { SpecLimit } from '#shared/units/limits.ts'
import type { Unit } from '#shared/units/quantities.ts'
import { comparedWith, type LocatedDecision } from './findings.ts'
import type { Answer, WalkRecord } from './state.ts'

/**
 * How the values of a page are judged: hand it, with the values so far, to `judgeTries`. On a proof the limits are those of the reading that
 * it compares with, and the verdict is one of the proof's own outcomes.
 */
export interface Judging {
  readonly reading: ReadingNode
  /** The limits in force; `null` when nobody knows them: then the person picks the outcome, unless bands are plain numbers. */
  readonly limits: SpecLimit | null
  /** A reading that repeats until equal; a proof takes its one value. */
  readonly repeat: NonNullable<ReadingNode['repeat']> | null
  readonly proof: {
    readonly confirmsWhen: readonly OutcomeId[]
    readonly confirming: OutcomeId
    /** The outcome of any other value, where there is only one. */
    readonly refuting: OutcomeId | null
    /** What was found before the change; `null` while that is not known. Does it confirm already, no value after the change proves anything. */
    readonly before: OutcomeId | null
  } | null
}

/** What values come to. */
export type Verdict =
  /** Nothing was measured yet. */
  | { readonly kind: 'no-value' }
  /** The last values are not equal yet: at least so many more. */
  | { readonly kind: 'more'; readonly wanted: number }
  /** As many values as the reading allows, and never equal: an outcome without a band, by hand. */
  | { readonly kind: 'unsettled' }
  /** Nobody knows the limits, or no band holds the value: the person picks. */
  | { readonly kind: 'by-hand' }
  /** A proof whose reading was within what confirms before anything was changed: the value is kept, the person says what the change did. */
  | { readonly kind: 'was-so-before' }
  /** A proof that was not confirmed, with several outcomes that say how: the person picks one of these. */
  | { readonly kind: 'not-confirmed' }
  | { readonly kind: 'outcome'; readonly outcome: OutcomeId }

function limitsInForce(walk: WalkRecord, check: LocatedDecision, reading: ReadingNode): SpecLimit | null {
  return limitsOf(reading, walk.limits, [...check.index.specKeys.values()], walk.machine)
}

/**
 * How the values of a node are judged now; `null` for a check, and for a proof that no compared reading judges. What a proof is held against has
 * still to be said: `heldAgainst`.
 */
export function judgingOf(walk: WalkRecord, check: LocatedDecision): Judging | null {
  const { node } = check
  if (node.kind === 'reading') return { reading: node, limits: limitsInForce(walk, check, node), repeat: node.repeat ?? null, proof: null }
  if (node.kind === 'check' || node.compares?.confirmsWhen === undefined) return null
  const compared = comparedWith(check)?.node
  const confirming = node.outcomes.find(({ confirms }) => confirms)
  if (compared?.kind !== 'reading' || confirming === undefined) return null
  const others = node.outcomes.filter(({ confirms }) => !confirms)
  return {
    reading: compared,
    limits: limitsInForce(walk, check, compared),
    repeat: null,
    proof: {
      confirmsWhen: node.compares.confirmsWhen,
      confirming: confirming.id,
      refuting: others.length === 1 ? (others[0]?.id ?? null) : null,
      before: null,
    },
  }
}

/** The same judging, with what was found before the change of its proof. On a reading there is nothing to hold a value against. */
export function heldAgainst(judging: Judging | null, before: Pick<Answer, 'outcome'> | null): Judging | null {
  return judging?.proof ? { ...judging, proof: { ...judging.proof, before: before?.outcome ?? null } } : judging
}

/** Whether the reading of a proof was within what confirms before anything was changed: then its value proves nothing. */
export function wasSoBefore({ proof }: Judging): boolean {
  return proof !== null && proof.before !== null && proof.confirmsWhen.includes(proof.before)
}

/** The same reading taken once, without its repeats: how `before` and `noticed`, which hold one value, are judged. */
export function takenOnce(judging: Judging | null): Judging | null {
  return judging && { ...judging, repeat: null }
}

/** Values closer than this are equal; differences of decimals are not exact. */
const rounding = 1e-9

/** How many of the last values lie within the reading's tolerance of each other; the tolerance is in the reading's unit. */
function equalAtTheEnd(reading: ReadingNode, within: number, values: readonly number[], unit: Unit): number {
  const inOwnUnit = values.map((value) => convertValue(value, unit, reading.unit) ?? Number.NaN)
  let low = Infinity
  let high = -Infinity
  let count = 0
  for (const value of inOwnUnit.toReversed()) {
    low = Math.min(low, value)
    high = Math.max(high, value)
    if (!(high - low <= within + rounding)) break
    count += 1
  }
  return count
}

function verdictOfValue(judging: Judging, value: number, unit: Unit): Verdict {
  const { reading, limits, proof } = judging
  const outcome = judgeReading(reading, limits, value, unit)
  if (outcome === null) return { kind: 'by-hand' }
  if (proof === null) return { kind: 'outcome', outcome }
  if (wasSoBefore(judging)) return { kind: 'was-so-before' }
  if (proof.confirmsWhen.includes(outcome)) return { kind: 'outcome', outcome: proof.confirming }
  return proof.refuting === null ? { kind: 'not-confirmed' } : { kind: 'outcome', outcome: proof.refuting }
}

/** What the values of a page come to; the last one counts, once a repeating reading has enough equal ones. Total: a unit that does not fit is by hand. */
export function judgeTries(judging: Judging, values: readonly number[], unit: Unit): Verdict {
  const last = values.at(-1)
  if (last === undefined) return { kind: 'no-value' }
  const { repeat } = judging
  if (repeat === null) return verdictOfValue(judging, last, unit)
  const equal = equalAtTheEnd(judging.reading, repeat.within, values, unit)
  if (equal >= repeat.equal) return verdictOfValue(judging, last, unit)
  return values.length >= repeat.atMost ? { kind: 'unsettled' } : { kind: 'more', wanted: repeat.equal - equal }
}

/** The outcomes of a node that measured values lead to. The others are buttons. On a check every outcome is one. */
export function bandedOutcomes(node: DecisionNode): ReadonlySet<OutcomeId> {
  return new Set(node.kind === 'reading' ? (node.bands ?? []).map(({ outcome }) => outcome) : [])
}

/** Whether a value lies within limits, ends included; `null` when they say nothing about its unit. A missing end is open. */
export function isWithin(limits: SpecLimit, value: number, unit: Unit): boolean | null {
  const range = 'as' in limits ? limits.as.find((printed) => printed.unit === unit) : limits
  if (range === undefined) return null
  const low = range.min === undefined ? 1 : compareAmounts(value, unit, range.min, range.unit)
  const high = range.max === undefined ? -1 : compareAmounts(value, unit, range.max, range.unit)
  return low === null || high === null ? null : low >= 0 && high <= 0
}
