import { useEffect, useSyncExternalStore } from 'react'

let isLocked = false
const listeners = new Set<() => void>()

function setLocked(locked: boolean): void {
  isLocked = locked
  listeners.forEach((listener) => listener())
}

/** Keeps the screen on while a walk is open, where the browser can (it can't on plain http). Nothing depends on it. */
export function useWakeLock(): void {
  useEffect(() => {
    let sentinel: WakeLockSentinel | null = null
    let isGone = false
    const ask = async (): Promise<void> => {
      if (document.visibilityState !== 'visible' || !('wakeLock' in navigator)) return
      try {
        const granted = await navigator.wakeLock.request('screen')
        if (isGone) {
          await granted.release()
          return
        }
        sentinel = granted
        setLocked(true)
        granted.addEventListener('release', () => setLocked(false))
      } catch {
        setLocked(false)
      }
    }
    const again = (): void => void ask()
    again()
    document.addEventListener('visibilitychange', again)
    return () => {
      isGone = true
      document.removeEventListener('visibilitychange', again)
      void sentinel?.release()
    }
  }, [])
}

/** Whether the screen is being kept on now. */
export function useIsAwakeLocked(): boolean {
  return useSyncExternalStore(
    (listener) => {
      listeners.add(listener)
      return () => listeners.delete(listener)
    },
    () => isLocked,
  )
}
