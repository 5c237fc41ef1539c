import { expect } from 'vitest'

import type { Role } from '#shared/trade/roles.ts'
import { desk, listAxeFindings, listSidewaysScroll, listSmallTargets, phone, thumb } from '#tests/support/browser.ts'

import type { ShopOfFile } from './shop.ts'
import { Technician } from './technician.ts'

/** WCAG 2.2 AA (2023), 2.5.8: the least size of a target. */
const leastTarget = 24
/** The least size of a control for a gloved hand: our own, larger than any standard asks for. */
const leastBenchTarget = 56
/** WCAG 2.2 AA (2023), 1.4.10: the width at which nothing may need sideways scroll. */
const narrowWidth = 320

/**
 * Looks a screen over at both sizes and in both themes, and tells what is wrong with it. Every rule of axe runs at each size, once in each theme;
 * the colours, which alone hang on the theme, run in both themes on the phone.
 */
async function inspect({ page }: Technician, screen: string, { isBench = false }: { readonly isBench?: boolean } = {}): Promise<readonly string[]> {
  const findings: string[] = []
  const note = (where: string, found: readonly string[]): void => void findings.push(...found.map((words) => `${screen}, ${where}: ${words}`))

  const noteTargets = async (size: string): Promise<void> => {
    note(size, await listSmallTargets(page, leastTarget))
    if (isBench) note(`${size}, bench`, await listSmallTargets(page, leastBenchTarget, '[data-mode="bench"]'))
  }

  await page.setViewportSize(phone)
  await page.emulateMedia({ colorScheme: 'light' })
  note('phone, light', await listAxeFindings(page))
  await page.emulateMedia({ colorScheme: 'dark' })
  note('phone, dark', await listAxeFindings(page, ['color-contrast']))
  await noteTargets('phone')
  await page.setViewportSize(desk)
  note('desk, dark', await listAxeFindings(page))
  await noteTargets('desk')
  await page.emulateMedia({ colorScheme: 'light' })
  await page.setViewportSize({ width: narrowWidth, height: phone.height })
  note(`${narrowWidth} px`, await listSidewaysScroll(page))
  await page.setViewportSize(phone)
  return findings
}

type Inspector = {
  readonly who: Technician
  /** Looks over the screen that is shown; `isBench` where it takes a gloved hand. */
  readonly see: (screen: string, isBench?: boolean) => Promise<void>
  readonly seePlayer: (screen: string) => Promise<void>
  /** Tells all that was wrong. */
  readonly end: () => Promise<void>
}

/** Somebody of a role, or of none, who goes from screen to screen of a shop. */
export function inspectorOf(shop: ShopOfFile): (role: Role | 'nobody') => Promise<Inspector> {
  return async (role) => {
    const who = role === 'nobody' ? new Technician(await shop.openDevice(thumb)) : await shop.seat(role, thumb)
    who.device.allow(/status of 4\d\d/)
    const findings: string[] = []
    return {
      who,
      see: async (screen, isBench = false) => void findings.push(...(await inspect(who, screen, { isBench }))),
      seePlayer: async (screen) => void findings.push(...(await inspect(who, `player: ${screen}`, { isBench: true }))),
      end: async () => {
        expect(findings).toEqual([])
        await who.leaves()
      },
    }
  }
}
