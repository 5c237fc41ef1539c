import { z } from 'zod'

import { engineKinds, equipmentClasses } from '#shared/trade/equipment.ts'

const storageKey = 'pullcord.last-machine'
const lastMachineSchema = z.object({ class: z.enum(equipmentClasses), engine: z.enum(engineKinds) })
export type LastMachine = z.infer<typeof lastMachineSchema>

/** Class and engine of the walk that was last started in this browser; most benches see more of the same. */
export function readLastMachine(): LastMachine | null {
  try {
    const kept = localStorage.getItem(storageKey)
    const parsed = kept === null ? null : lastMachineSchema.safeParse(JSON.parse(kept))
    return parsed?.success === true ? parsed.data : null
  } catch {
    return null
  }
}

export function writeLastMachine({ class: machineClass, engine }: LastMachine): void {
  try {
    localStorage.setItem(storageKey, JSON.stringify({ class: machineClass, engine }))
  } catch {
    // A browser that keeps nothing starts with the chart's own first class.
  }
}
