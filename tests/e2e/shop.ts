import type { BrowserContext } from 'playwright-core'
import { afterAll, beforeAll, beforeEach, expect, inject } from 'vitest'

import { demoSignIns } from '#server/services/demo-sign-ins.ts'
import type { Role } from '#shared/trade/roles.ts'
import type { Device, Hands } from '#tests/support/browser.ts'
import { openDevice } from '#tests/support/browser.ts'
import { ShopProcess } from '#tests/support/shop-process.ts'

import { Technician } from './technician.ts'

type Cookies = Awaited<ReturnType<BrowserContext['cookies']>>

export type ShopOfFile = {
  readonly process: () => ShopProcess
  /** A device of nobody yet; put away by `using` or by `close`. */
  readonly openDevice: (hands: Hands) => Promise<Device>
  /** Somebody at a device of their own, at the bench. The first of a role signs in by hand; later devices get the session of the first. */
  readonly seat: (role: Role, hands: Hands) => Promise<Technician>
}

/** One server for the journeys of a file: a copy of the demo shop, or what the environment makes of an empty folder. */
export function shopOfFile(environment?: Readonly<Record<string, string>>): ShopOfFile {
  let shop: ShopProcess | null = null
  const sessions = new Map<Role, Cookies>()
  const running = (): ShopProcess => {
    if (shop === null) throw new Error('The shop is not open yet.')
    return shop
  }
  beforeAll(async () => {
    shop = await ShopProcess.open(environment === undefined ? { prepared: inject('preparedShop') } : { environment })
  })
  beforeEach(async () => {
    // A test that failed while the server was lost leaves it lost.
    if (!running().isRunning) await running().start()
  })
  afterAll(async () => {
    const faults = running().listFaults()
    await running().close()
    expect(faults).toEqual([])
  })
  return {
    process: running,
    openDevice: (hands) => openDevice(running().url, hands),
    seat: async (role, hands) => {
      const technician = new Technician(await openDevice(running().url, hands))
      const cookies = sessions.get(role)
      if (cookies === undefined) {
        await technician.signIn(signInOf(role))
        sessions.set(role, await technician.device.context.cookies())
      } else {
        await technician.device.context.addCookies(cookies)
        await technician.comesToTheBench()
      }
      return technician
    },
  }
}

export function signInOf(role: Role): { readonly name: string; readonly email: string; readonly password: string } {
  const found = demoSignIns.find((one) => one.role === role)
  if (found === undefined) throw new Error(`The demo shop has no ${role}.`)
  return found
}
