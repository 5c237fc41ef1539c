import { spawnSync } from 'node:child_process'
import { fileURLToPath } from 'node:url'

import type { BrowserServer } from 'playwright-core'
import { chromium } from 'playwright-core'
import type { TestProject } from 'vitest/node'

import { ShopProcess } from './shop-process.ts'

declare module 'vitest' {
  interface ProvidedContext {
    /** Where the one browser of the run listens. */
    browserEndpoint: string
    /** A data folder with the demo shop in it, to be copied and never opened. */
    preparedShop: string
  }
}

const root = fileURLToPath(new URL('../..', import.meta.url))

const browserArgs = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
  '--no-first-run',
  '--disable-quic',
]

/** Once for all journeys: the pages as they are now, one browser, and one demo shop that every file copies. */
export async function setup(project: TestProject): Promise<() => Promise<void>> {
  buildPages()
  const [browser, prepared] = await Promise.all([launchBrowser(), ShopProcess.open()])
  await prepared.stop()
  project.provide('browserEndpoint', browser.wsEndpoint())
  project.provide('preparedShop', prepared.dataFolder)
  return async () => {
    await browser.close()
    await prepared.close()
  }
}

function launchBrowser(): Promise<BrowserServer> {
  return chromium.launchServer({ executablePath: '/usr/bin/chromium', args: browserArgs, host: '127.0.0.1' })
}

/** Builds the pages when they are older than what they are made from. */
function buildPages(): void {
  const { status } = spawnSync(process.execPath, ['server/setup/prepare.mjs', 'start'], { cwd: root, stdio: ['ignore', 'ignore', 'inherit'] })
  if (status !== 0) throw new Error('The pages could not be built.')
}
