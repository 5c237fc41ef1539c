import { useSyncExternalStore } from 'react'

export type Announcement = { readonly id: number; readonly text: string }

let current: Announcement = { id: 0, text: '' }
const listeners = new Set<() => void>()

/** Says something once to people who hear the page instead of seeing it. What is said must also stand on the screen. */
export function announce(text: string): void {
  current = { id: current.id + 1, text }
  listeners.forEach((listener) => listener())
}

export function useAnnouncement(): Announcement {
  return useSyncExternalStore(
    (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    () => current,
  )
}
