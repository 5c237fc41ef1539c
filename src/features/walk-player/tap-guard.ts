import { useCallback, useEffect, useLayoutEffect, useRef, useState } from 'react'

/** A second tap within this time is a slip of a gloved or wet finger. */
export const doubleTapMs = 350
/** New outcomes take no tap for this long: the finger may still be coming down on the old ones. */
export const newPageMs = 250
/** Nobody reads a caution faster than this. */
export const cautionMs = 600

let lastActAt = -Infinity

/**
 * Lets an act through unless it comes too soon: after another one, or after the page it stands on appeared. `click` events are what
 * it guards, so that an act happens on release and a finger that slides off takes it back.
 */
export function useTapGuard(pageKey: string, deadMs: number = newPageMs): (act: () => void) => void {
  const shownAt = useRef(-Infinity)
  // Counted from the moment when the page stands there, not from when the browser finds time for it.
  useLayoutEffect(() => {
    shownAt.current = performance.now()
  }, [pageKey])
  return useCallback(
    (act) => {
      const now = performance.now()
      if (now - shownAt.current < deadMs || now - lastActAt < doubleTapMs) return
      lastActAt = now
      act()
    },
    [deadMs],
  )
}

/** True once a page has been there for `ms`: until then its button shows that it takes no tap. */
export function useIsAwake(pageKey: string, ms: number): boolean {
  const [awakeKey, setAwakeKey] = useState<string | null>(null)
  useEffect(() => {
    const timer = setTimeout(() => setAwakeKey(pageKey), ms)
    return () => clearTimeout(timer)
  }, [pageKey, ms])
  return awakeKey === pageKey
}
