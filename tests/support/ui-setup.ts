import '@testing-library/jest-dom/vitest'

import { cleanup, configure } from '@testing-library/react'
import { afterEach, vi } from 'vitest'

// A screen's file is fetched when it is first shown; on a busy machine that takes its time.
configure({ asyncUtilTimeout: 10_000 })
vi.setConfig({ testTimeout: 30_000 })

afterEach(() => {
  cleanup()
  document.documentElement.dataset['theme'] = 'auto'
  localStorage.clear()
})

// What jsdom lacks and screens may ask for; what they measure is tried in a real browser.
window.scrollTo = () => undefined
Element.prototype.scrollIntoView ??= () => undefined
globalThis.ResizeObserver ??= class {
  observe(): void {}
  unobserve(): void {}
  disconnect(): void {}
}
window.matchMedia ??= (query) =>
  ({
    matches: false,
    media: query,
    onchange: null,
    addEventListener: () => undefined,
    removeEventListener: () => undefined,
    dispatchEvent: () => false,
  }) as unknown as MediaQueryList
