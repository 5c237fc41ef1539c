import type { SpecKeyId } from '#shared/lib/ids.ts'
import { equipmentClasses, type EquipmentClass } from './equipment.ts'

/** A reading that an item of the run asks for: its spec key, its quantity and the unit in which the bench reads it. */
export interface RunReading {
  readonly specKey: SpecKeyId
  readonly quantity: 'rotational-speed'
  readonly unit: '1/min'
}

/** One item of the hand-back run: what must be true of the machine before it leaves. `id` is stored in walks and never renamed. */
export interface RunListItem {
  readonly id: string
  readonly title: string
  /** How it is looked at, where the title alone does not say it. */
  readonly how?: string
  /** The value to write down; judged where the machine's limits are known. */
  readonly reading?: RunReading
}

interface ClassedItem extends RunListItem {
  readonly applies: readonly EquipmentClass[]
}

const saws: readonly EquipmentClass[] = ['chain-saw']
const headMachines: readonly EquipmentClass[] = ['line-trimmer', 'brush-cutter']
const blowers: readonly EquipmentClass[] = ['leaf-blower']
const pumps: readonly EquipmentClass[] = ['water-pump']
/** Classes whose cutting gear hangs on a centrifugal clutch and whose trigger the hand holds. */
const triggered: readonly EquipmentClass[] = ['chain-saw', 'line-trimmer', 'brush-cutter', 'hedge-trimmer', 'leaf-blower', 'cut-off-saw']
const everything: readonly EquipmentClass[] = equipmentClasses
const speedMeasured: readonly EquipmentClass[] = equipmentClasses.filter((name) => name !== 'other')

const fullSpeed: RunReading = { specKey: 'fullSpeed' as SpecKeyId, quantity: 'rotational-speed', unit: '1/min' }

/**
 * The items in the order in which they are made: from a cold look at the controls through idle to full speed, then a last look round.
 * Common practice; restart, idle, stop switch and seal of the pump after NWCG PMS 448 (2017), pump refurbishment standards;
 * brake, catcher, guards and muffler after the pre-shift checks of WAC 296-45-295.
 */
const items: readonly ClassedItem[] = [
  { id: 'trigger-returns', title: 'Trigger snaps back by itself', applies: triggered },
  { id: 'starts-easily', title: 'Starts easily, rope winds home', applies: everything },
  { id: 'stop-switch-stops', title: 'Stop switch stops the engine', applies: everything },
  { id: 'chain-still-at-idle', title: 'Chain stands still at idle', how: '20 s, brake off, on the ground', applies: saws },
  { id: 'head-still-at-idle', title: 'Head stands still at idle', how: '20 s, clear of the ground', applies: headMachines },
  { id: 'blades-still-at-idle', title: 'Blades stand still at idle', how: '20 s, clear of everything', applies: ['hedge-trimmer'] },
  { id: 'wheel-still-at-idle', title: 'Wheel stands still at idle', how: '20 s, clear of the ground', applies: ['cut-off-saw'] },
  { id: 'same-idle-on-all-sides', title: 'Same idle on all sides', how: 'brake set, 10 s on each side', applies: saws },
  { id: 'brake-stops-chain', title: 'Brake stops the chain at once', how: 'from a short burst, then clicks off', applies: saws },
  { id: 'full-speed', title: 'Full speed, no load', how: '5 s at most, warm', reading: fullSpeed, applies: speedMeasured },
  { id: 'oil-off-the-nose', title: 'Oil streak comes off the nose', how: 'nose 10 cm over paper', applies: saws },
  { id: 'enough-at-pump-end', title: 'Enough pressure at the pump end', how: 'outlet opened slowly', applies: pumps },
  { id: 'seal-dry', title: 'No leak at the shaft seal', applies: pumps },
  { id: 'pump-controls-work', title: 'Throttle and choke move fully', applies: pumps },
  { id: 'no-fuel-or-oil-leak', title: 'No fuel or oil leaks', applies: everything },
  { id: 'saw-guards-in-place', title: 'Catcher, guards, mounts, muffler, screen in place', applies: saws },
  { id: 'guard-and-line-cutter', title: 'Guard and line cutter fitted', applies: headMachines },
  { id: 'harness-hook', title: 'Harness hook holds', applies: headMachines },
  { id: 'tubes-lock', title: 'Tubes lock', applies: blowers },
  { id: 'fan-screen-on', title: 'Fan screen is on', applies: blowers },
  {
    id: 'guards-and-muffler-in-place',
    title: 'Guards, muffler and screen in place',
    applies: equipmentClasses.filter((name) => name !== 'chain-saw'),
  },
]

/**
 * The hand-back run of an equipment class, in the order in which it is made after every repair: each item is done, then confirmed.
 * Every class has a list; what a class has no item of its own for is covered by the items that hold for all machines.
 */
export function handBackRun(equipmentClass: EquipmentClass): readonly RunListItem[] {
  return items.filter((item) => item.applies.includes(equipmentClass)).map(({ applies: _applies, ...item }) => item)
}
