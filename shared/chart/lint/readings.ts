import { unitsOfQuantity, type Quantity } from '#shared/units/quantities.ts'
import { bandFaults } from '../bands.ts'
import type { ReadingNode } from '../document.ts'
import { nameOf, outcomeName, type LintContext, type Rule } from './context.ts'
import { remark, type Remark } from './remark.ts'

/** Quantities that can lie below zero on a gauge. */
const signed: ReadonlySet<Quantity> = new Set(['temperature', 'pressure', 'vacuum', 'voltage'])

/** Bands cover every value once. */
export const bands: Rule = function* ({ index }) {
  for (const node of index.nodes.values()) {
    if (node.kind !== 'reading') continue
    const faults = bandFaults(node.bands ?? [], node.limits, !signed.has(node.quantity))
    if (faults === undefined) yield undecided(index, node)
    for (const fault of faults ?? []) {
      const titles = node.outcomes.filter((outcome) => fault.outcomes.includes(outcome.id)).map(outcomeName)
      yield fault.kind === 'gap'
        ? remark('bands-gap', { node: node.id }, `A value ${fault.where} belongs to no outcome of ${nameOf(index, node)}. Widen a band, or include its end.`)
        : remark(
            'bands-overlap',
            { node: node.id },
            `A value ${fault.where} belongs to several outcomes of ${nameOf(index, node)}${titles.length > 1 ? `: ${titles.join(' and ')}` : ''}. Let one band end where the next begins.`,
          )
    }
  }
}

function undecided(index: LintContext['index'], node: ReadingNode): Remark {
  const name = nameOf(index, node)
  return node.limits === undefined
    ? remark('bands-undecided', { node: node.id }, `The bands of ${name} speak of its limits, but it has none. Give it limits, or use numbers.`)
    : remark(
        'bands-undecided',
        { node: node.id },
        `The bands of ${name} mix numbers with limits that only a spec sheet knows, so nobody can tell whether they fit together. Use the limits alone, or numbers alone.`,
      )
}

/** Units fit their quantity, here and where the limits come from; lower limits lie below upper ones. */
export const units: Rule = function* ({ index, chart }) {
  for (const node of index.nodes.values()) if (node.kind === 'reading') yield* readingUnits(index, node)
  for (const key of chart.library.specKeys ?? []) {
    if (!fits(key.quantity, key.unit))
      yield remark('unit-mismatch', {}, `Spec key "${key.title}" gives a ${words(key.quantity)} in ${key.unit}. ${choose(key.quantity)}`)
    if ((key.general ?? []).some(inverted)) yield remark('limits-inverted', {}, `Spec key "${key.title}" has a lower limit above its upper one. Swap them.`)
  }
}

function* readingUnits(index: LintContext['index'], node: ReadingNode): Iterable<Remark> {
  const name = nameOf(index, node)
  const at = { node: node.id }
  if (!fits(node.quantity, node.unit)) yield remark('unit-mismatch', at, `${name} measures a ${words(node.quantity)} in ${node.unit}. ${choose(node.quantity)}`)
  const { limits } = node
  if (limits === undefined) return
  if ('spec' in limits) {
    const key = index.specKeys.get(limits.spec)
    if (key !== undefined && key.quantity !== node.quantity)
      yield remark(
        'unit-mismatch',
        at,
        `${name} measures a ${words(node.quantity)}, but its limits come from "${key.title}", a ${words(key.quantity)}. Name another spec key.`,
      )
    return
  }
  const printed = 'as' in limits ? limits.as : []
  for (const range of printed) {
    if (!fits(node.quantity, range.unit))
      yield remark(
        'unit-mismatch',
        at,
        `${name} measures a ${words(node.quantity)}, but one of its limits is printed in ${range.unit}. ${choose(node.quantity)}`,
      )
  }
  if (('as' in limits ? printed : [limits]).some(inverted)) yield remark('limits-inverted', at, `${name} has a lower limit above its upper one. Swap them.`)
}

function fits(quantity: Quantity, unit: string): boolean {
  return (unitsOfQuantity[quantity] as readonly string[]).includes(unit)
}

function inverted(range: { readonly min?: number | undefined; readonly max?: number | undefined }): boolean {
  return range.min !== undefined && range.max !== undefined && range.min > range.max
}

function words(quantity: Quantity): string {
  return quantity.replace('-', ' ')
}

function choose(quantity: Quantity): string {
  return `Choose ${unitsOfQuantity[quantity].join(', ')}.`
}
