import type { SpecKeyId } from '#shared/lib/ids.ts'
import type { EngineKind, EquipmentClass } from '#shared/trade/equipment.ts'
import { handBackRun } from '#shared/trade/hand-back-run.ts'
import type { SpecLimit, SpecLimits } from '#shared/units/limits.ts'
import type { ChartDocument, SpecKey } from './document.ts'

/** What decides which general values hold for a machine. */
export interface MachineKind {
  readonly class: EquipmentClass
  readonly engine: EngineKind
}

type GeneralValue = NonNullable<SpecKey['general']>[number]

/** How closely a general value is meant for a machine: the more it names, the closer; `null` when it is for others. */
function closeness(value: GeneralValue, machine: MachineKind | undefined): number | null {
  if (value.classes !== undefined && !(machine !== undefined && value.classes.includes(machine.class))) return null
  if (value.engines !== undefined && !(machine !== undefined && value.engines.includes(machine.engine))) return null
  return (value.classes ? 2 : 0) + (value.engines ? 1 : 0)
}

/**
 * The general limit of a spec key for a machine: the entry that names most of what the machine is, the first written on ties. Without a
 * machine only an entry for every machine counts. `null` when none fits or the one that fits states no end.
 */
export function generalLimit(key: SpecKey, machine?: MachineKind): SpecLimit | null {
  let best: { value: GeneralValue; closeness: number } | null = null
  for (const value of key.general ?? []) {
    const close = closeness(value, machine)
    if (close !== null && (best === null || close > best.closeness)) best = { value, closeness: close }
  }
  if (best === null) return null
  const { min, max } = best.value
  if (min === undefined && max === undefined) return null
  return { ...(min === undefined ? {} : { min }), ...(max === undefined ? {} : { max }), unit: key.unit }
}

/** The keys that the readings of a chart judge by. */
function keysOf(chart: ChartDocument): SpecKeyId[] {
  const keys = (chart.library.specKeys ?? []).map(({ id }) => id)
  for (const node of chart.nodes) {
    if (node.kind === 'reading' && node.limits !== undefined && 'spec' in node.limits) keys.push(node.limits.spec)
  }
  return keys
}

/**
 * The limits that a walk carries: for every key of the charts in reach and of the machine's hand-back run, the model's own value first,
 * else the first of the charts' general values that fits class and engine. A key without any value is left out: a reading by it is
 * then judged by hand.
 */
export function specLimitsFor(charts: readonly ChartDocument[], machine: MachineKind, sheet: SpecLimits | null): SpecLimits {
  const runKeys = handBackRun(machine.class).flatMap(({ reading }) => (reading ? [reading.specKey] : []))
  const limits: SpecLimits = {}
  for (const id of new Set([...charts.flatMap(keysOf), ...runKeys])) {
    const own = sheet !== null && Object.hasOwn(sheet, id) ? sheet[id] : undefined
    const limit = own ?? generalOf(charts, id, machine)
    if (limit !== null) limits[id] = limit
  }
  return limits
}

function generalOf(charts: readonly ChartDocument[], id: SpecKeyId, machine: MachineKind): SpecLimit | null {
  for (const chart of charts) {
    const key = chart.library.specKeys?.find((candidate) => candidate.id === id)
    const limit = key === undefined ? null : generalLimit(key, machine)
    if (limit !== null) return limit
  }
  return null
}
