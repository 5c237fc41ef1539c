import { useSyncExternalStore } from 'react'

export const themes = ['auto', 'light', 'dark', 'strong'] as const
export type Theme = (typeof themes)[number]

export const themeWords: Readonly<Record<Theme, string>> = {
  auto: 'As the system',
  light: 'Light',
  dark: 'Dark',
  strong: 'Strong black and white',
}

/** The same key stands in src/public/theme.js, which runs before the first paint. */
const storageKey = 'pullcord.theme'
const listeners = new Set<() => void>()

function isTheme(value: string | undefined): value is Theme {
  return themes.some((theme) => theme === value)
}

function readTheme(): Theme {
  const set = document.documentElement.dataset['theme']
  return isTheme(set) ? set : 'auto'
}

export function setTheme(theme: Theme): void {
  document.documentElement.dataset['theme'] = theme
  try {
    localStorage.setItem(storageKey, theme)
  } catch {
    // A browser that keeps nothing shows the theme until the page is loaded again.
  }
  listeners.forEach((listener) => listener())
}

export function useTheme(): Theme {
  return useSyncExternalStore((listener) => {
    listeners.add(listener)
    return () => listeners.delete(listener)
  }, readTheme)
}
