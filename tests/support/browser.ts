import { join } from 'node:path'

import AxeBuilder from '@axe-core/playwright'
import type { Browser, BrowserContext, Page } from 'playwright-core'
import { chromium } from 'playwright-core'
import { expect, inject, onTestFailed } from 'vitest'

/** Who holds the device, and how: what a journey is played with. */
export type Hands = {
  readonly words: string
  readonly viewport: { readonly width: number; readonly height: number }
  /** `touch`: a thumb and nothing else. `keys`: a keyboard and nothing else. */
  readonly by: 'touch' | 'keys'
  readonly theme: 'light' | 'dark'
}

export const phone = { width: 390, height: 844 } as const
export const desk = { width: 1280, height: 800 } as const

export const thumb: Hands = { words: 'by thumb on a phone, in the light theme', viewport: phone, by: 'touch', theme: 'light' }
export const keyboard: Hands = { words: 'by keyboard alone at a desk, in the dark theme', viewport: desk, by: 'keys', theme: 'dark' }

/** The two ways in which every journey is played; between them both sizes, both kinds of hands and both themes. */
export const bothHands = [thumb, keyboard] as const

let connected: Promise<Browser> | null = null

/** The one browser of the run. */
function connect(): Promise<Browser> {
  connected ??= chromium.connect(inject('browserEndpoint'))
  return connected
}

/** A device with its own cookies and storage, and one page that reports whatever goes wrong on it. */
export type Device = {
  readonly context: BrowserContext
  readonly page: Page
  readonly hands: Hands
  /** Words of the console that are wanted on this device, such as the 401 of a refused sign-in. */
  readonly allow: (words: RegExp) => void
  /** Keeps a picture of the page when PULLCORD_PICTURES names a folder for pictures: for whoever wants to look at the screens of a journey. */
  readonly look: (name: string) => Promise<void>
  /** Puts the device away; fails if its console or the network told of a fault. */
  readonly close: () => Promise<void>
}

export async function openDevice(url: string, hands: Hands): Promise<Device> {
  const context = await (await connect()).newContext({
    baseURL: url,
    viewport: { ...hands.viewport },
    hasTouch: hands.by === 'touch',
    isMobile: hands.by === 'touch',
    colorScheme: hands.theme,
    reducedMotion: 'reduce',
    locale: 'en-GB',
    permissions: ['clipboard-read', 'clipboard-write'],
  })
  context.setDefaultTimeout(30_000)
  // Time goes by as ever; what waits for a hand to be slow enough is moved on by a jump of the clock, never by waiting.
  await context.clock.install()
  await context.addInitScript(countTaps)
  const page = await context.newPage()
  const allowed: RegExp[] = []
  const faults = collectFaults(page)
  let pictures = 100
  onTestFailed(async () => {
    const name = toFileName(expect.getState().currentTestName ?? 'test')
    // The page may have gone with the test's own end.
    await page.screenshot({ path: join('test-results', `${name}-${hands.by}.png`), fullPage: true }).catch(() => undefined)
  })
  return {
    context,
    page,
    hands,
    allow: (words) => void allowed.push(words),
    look: async (name) => {
      const folder = process.env['PULLCORD_PICTURES']
      if (folder !== undefined) await page.screenshot({ path: join(folder, hands.by, `${toFileName(`${(pictures += 1)} ${name}`)}.png`), fullPage: true })
    },
    close: async () => {
      await context.close()
      expect(faults.filter((fault) => !allowed.some((words) => words.test(fault)))).toEqual([])
    },
  }
}

function toFileName(words: string): string {
  return words.replace(/[^A-Za-z0-9]+/g, '-').slice(0, 120)
}

/** What the page must not do: speak to the console of errors or warnings, break its content policy, throw, or get an answer of 500. */
function collectFaults(page: Page): readonly string[] {
  const faults: string[] = []
  page.on('console', (message) => {
    if (['error', 'warning'].includes(message.type())) faults.push(`${message.type()}: ${message.text()}`)
  })
  page.on('pageerror', (error) => faults.push(`thrown: ${error.message}`))
  page.on('response', (response) => {
    if (response.status() >= 500) faults.push(`${response.status()} from ${response.request().method()} ${response.url()}`)
  })
  return faults
}

/** Runs in the page: counts what a finger did, with the digits of a value left to its Record. Outlives a reload. */
function countTaps(): void {
  addEventListener(
    'click',
    (event) => {
      const isDigit = event.target instanceof Element && event.target.closest('[aria-label="Number pad"]') !== null
      if (event.isTrusted && !isDigit) sessionStorage.setItem('taps', String(Number(sessionStorage.getItem('taps')) + 1))
    },
    true,
  )
}

/** Taps on this page so far: a typed value counts as one, with its Record. */
export async function readTaps(page: Page): Promise<number> {
  return Number(await page.evaluate(() => sessionStorage.getItem('taps')))
}

const wcagTags = ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']

/** What axe finds on the page as it stands, in words that name the rule and the element; `only` runs some rules alone. */
export async function listAxeFindings(page: Page, only?: readonly string[]): Promise<readonly string[]> {
  const builder = new AxeBuilder({ page }).setLegacyMode()
  const axe =
    only === undefined
      ? // target-size is off by default even with its tag; the rules on headings and landmarks carry no WCAG tag.
        builder.options({ runOnly: { type: 'tag', values: [...wcagTags, 'best-practice'] }, resultTypes: ['violations'], rules: { 'target-size': { enabled: true } } })
      : builder.withRules([...only])
  const { violations } = await axe.analyze()
  return violations.flatMap(({ id, help, nodes }) => nodes.map(({ target, failureSummary }) => `${id} (${help}): ${target.join(' ')}: ${failureSummary ?? ''}`))
}

/**
 * Controls in what `within` selects that are narrower or lower than they may be, and how large they are. A link inside a sentence is as high as
 * its line, and one that shows only with the focus on it has no size before.
 */
export async function listSmallTargets(page: Page, least: number, within = 'body'): Promise<readonly string[]> {
  return page.evaluate(([leastSize, root]) => {
    const isShown = (element: Element): boolean => element.checkVisibility({ checkOpacity: true, checkVisibilityCSS: true }) && element.getBoundingClientRect().width > 1 && getComputedStyle(element).clipPath === 'none'
    const targetOf = (element: Element): Element => (element instanceof HTMLInputElement && ['checkbox', 'radio'].includes(element.type) ? (element.closest('label') ?? element) : element)
    const isInSentence = (element: Element): boolean => element instanceof HTMLAnchorElement && getComputedStyle(element).display === 'inline'
    return [...document.querySelectorAll(root)]
      .flatMap((part) => [...part.querySelectorAll('a[href], button, input:not([type=hidden]), select, textarea, summary')])
      .filter((element) => isShown(element) && !isInSentence(element))
      .map((element) => ({ element, box: targetOf(element).getBoundingClientRect() }))
      .filter(({ box }) => box.width < leastSize - 0.5 || box.height < leastSize - 0.5)
      .map(({ element, box }) => `${element.tagName.toLowerCase()} "${(element.getAttribute('aria-label') ?? element.textContent ?? '').trim().slice(0, 40)}" ${Math.round(box.width)} x ${Math.round(box.height)}`)
  }, [least, within] as const)
}

/** Whether the page can be pushed sideways, and by what. */
export async function listSidewaysScroll(page: Page): Promise<readonly string[]> {
  return page.evaluate(() => {
    const room = document.documentElement.clientWidth
    if (document.documentElement.scrollWidth <= room) return []
    return [...document.querySelectorAll('body *')]
      .filter((element) => element.getBoundingClientRect().right > room + 0.5)
      .slice(0, 5)
      .map((element) => `${element.tagName.toLowerCase()} "${(element.textContent ?? '').trim().slice(0, 40)}" ends at ${Math.round(element.getBoundingClientRect().right)} of ${room}`)
  })
}
