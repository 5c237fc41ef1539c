import { useCallback, useState } from 'react'

import type { WalkId } from '#shared/lib/ids.ts'

/** The one thing that is asked of a schema here; every zod schema has it. */
type Shape<T> = { safeParse: (value: unknown) => { success: true; data: T } | { success: false } }

function toKey(walkId: WalkId, name: string): string {
  return `pullcord.scratch.${walkId}.${name}`
}

function read<T>(key: string, shape: Shape<T>): T | null {
  try {
    const kept = localStorage.getItem(key)
    if (kept === null) return null
    const parsed = shape.safeParse(JSON.parse(kept))
    return parsed.success ? parsed.data : null
  } catch {
    return null
  }
}

function write(key: string, value: unknown): void {
  try {
    if (value === null) localStorage.removeItem(key)
    else localStorage.setItem(key, JSON.stringify(value))
  } catch {
    // A browser that keeps nothing forgets this with the page; it was not recorded yet.
  }
}

/**
 * Something begun on this device that is not an event yet (tries of a reading, the value before a change, values of the run): it
 * outlives a reload, and is `null` until it is begun and after it was recorded.
 */
export function useScratch<T>(walkId: WalkId, name: string, shape: Shape<T>): [T | null, (value: T | null) => void] {
  const key = toKey(walkId, name)
  const [held, setHeld] = useState(() => ({ key, value: read(key, shape) }))
  const current = held.key === key ? held : { key, value: read(key, shape) }
  if (current !== held) setHeld(current)
  const set = useCallback(
    (value: T | null) => {
      setHeld({ key, value })
      write(key, value)
    },
    [key],
  )
  return [current.value, set]
}

/** Forgets everything that was begun in a walk that is over. */
export function forgetScratch(walkId: WalkId): void {
  try {
    const begin = toKey(walkId, '')
    for (const key of Object.keys(localStorage)) if (key.startsWith(begin)) localStorage.removeItem(key)
  } catch {
    // Nothing was kept, so nothing is left.
  }
}
