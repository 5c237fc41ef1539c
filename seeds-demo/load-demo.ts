import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { z } from 'zod'
import { modelSchema } from '#shared/api/models.ts'
import { createShop, isSetUp } from '#server/services/shop.ts'
import { addModels } from '#server/services/library.ts'
import { publishDemoCharts } from './demo-charts.ts'
import type { Deps } from './demo-deps.ts'
import { addDemoWalks } from './demo-walks.ts'
import { addDemoPeople } from './demo-people.ts'

/** The shop has worked with Pullcord for so long. */
const openedDaysAgo = 60

/**
 * Loads the demo shop into an empty database, all or nothing, by the same services as people use. A database that holds anything is
 * left as it is.
 */
export async function loadDemo(deps: Deps): Promise<void> {
  if (deps.config.isProduction) throw new Error('The demo shop has sign-ins that everybody knows: it is not loaded with NODE_ENV=production.')
  await deps.db.transaction(async (tx) => {
    if (await isSetUp(tx)) return
    const inside = { ...deps, db: tx }
    const atOpening = { ...inside, clock: () => new Date(deps.clock().getTime() - openedDaysAgo * 86_400_000) }
    await createShop(tx, atOpening, { name: 'Alder Row Small Engines', isDemo: true })
    const people = await addDemoPeople(atOpening)
    await publishDemoCharts(atOpening, people.lead)
    await addModels(atOpening, readModels())
    await addDemoWalks(inside, people)
  })
}

function readModels() {
  return z.array(modelSchema).parse(JSON.parse(readFileSync(join(import.meta.dirname, 'models.json'), 'utf8')))
}
