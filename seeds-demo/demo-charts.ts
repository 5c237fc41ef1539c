import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { createChart } from '#server/services/drafts.ts'
import { publishDraft } from '#server/services/publish.ts'
import type { CurrentSession } from '#server/services/sessions.ts'
import type { Deps } from './demo-deps.ts'

const folder = join(import.meta.dirname, 'charts')

/** Publishes every chart file as its version 1. A jump to a chart that is not there yet is a warning, and the lead has read it. */
export async function publishDemoCharts(deps: Deps, lead: CurrentSession): Promise<void> {
  const files = readdirSync(folder)
    .filter((name) => name.endsWith('.json'))
    .sort()
  for (const file of files) {
    const draft = await createChart(deps, lead, JSON.parse(readFileSync(join(folder, file), 'utf8')))
    await publishDraft(deps, lead, { chartId: draft.chartId, revision: draft.revision, changeNote: 'First version', acceptsWarnings: true })
  }
}
