import { useEffect, useEffectEvent, useSyncExternalStore } from 'react'

/** A key as `KeyboardEvent.key` says it: '1', 'n', '?', 'Backspace'. Letters in lower case. */
export type Shortcut = { readonly key: string; readonly words: string }

type Entry = Shortcut & { readonly run: () => void }

const storageKey = 'pullcord.single-keys'
const entries = new Set<Entry>()
const listeners = new Set<() => void>()
let listed: readonly Shortcut[] = []
let areOn = readStored()

function readStored(): boolean {
  try {
    return localStorage.getItem(storageKey) !== 'off'
  } catch {
    return true
  }
}

function tell(): void {
  listed = [...entries].map(({ key, words }) => ({ key, words }))
  listeners.forEach((listener) => listener())
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener)
  return () => listeners.delete(listener)
}

/** Whether somebody is writing: then a letter is a letter (WCAG 2.2, 2.1.4). */
function isWriting(target: EventTarget | null): boolean {
  if (!(target instanceof HTMLElement)) return false
  if (target instanceof HTMLInputElement) return !['button', 'checkbox', 'radio', 'submit', 'reset'].includes(target.type)
  return target instanceof HTMLTextAreaElement || target instanceof HTMLSelectElement || target.isContentEditable
}

function onKeyDown(event: KeyboardEvent): void {
  if (!areOn || event.defaultPrevented || event.repeat || event.isComposing) return
  if (event.ctrlKey || event.altKey || event.metaKey || isWriting(event.target)) return
  // A dialog covers the page, and with it the page's keys.
  if (document.querySelector('[role="dialog"], [role="alertdialog"]') !== null) return
  const key = event.key.length === 1 ? event.key.toLowerCase() : event.key
  // The youngest wins: what lies on top of a page answers before the page.
  const entry = [...entries].reverse().find((each) => each.key === key)
  if (entry === undefined) return
  event.preventDefault()
  entry.run()
}

function add(entry: Entry): () => void {
  if (entries.size === 0) document.addEventListener('keydown', onKeyDown)
  entries.add(entry)
  tell()
  return () => {
    entries.delete(entry)
    if (entries.size === 0) document.removeEventListener('keydown', onKeyDown)
    tell()
  }
}

/** A single key that does something while this component is on the page; `words` stand in the list of keys. `null`: no key now. */
export function useShortcut(key: string | null, words: string, run: () => void): void {
  const onKey = useEffectEvent(run)
  useEffect(() => (key === null ? undefined : add({ key, words, run: () => onKey() })), [key, words])
}

/** The keys that act on the page now, in the order in which they came. */
export function useShortcutList(): readonly Shortcut[] {
  return useSyncExternalStore(subscribe, () => listed)
}

export function useAreShortcutsOn(): boolean {
  return useSyncExternalStore(subscribe, () => areOn)
}

export function setShortcutsOn(on: boolean): void {
  areOn = on
  try {
    localStorage.setItem(storageKey, on ? 'on' : 'off')
  } catch {
    // A browser that keeps nothing forgets this with the page.
  }
  tell()
}
