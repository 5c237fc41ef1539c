import type { MachineModel } from '#shared/api/models.ts'
import type { ChartVersion } from '#shared/api/charts.ts'
import type { ChartId, DeviceId, EventId, ModelId, NodeId, QuestionId, WalkId } from '#shared/lib/ids.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import { toPinnedCharts, type PinnedCharts } from '#shared/walk/pinned-charts.ts'
import { appendEvent } from '#shared/walk/replay.ts'
import { toPage } from '#shared/walk/select.ts'
import { newWalk, type WalkState } from '#shared/walk/state.ts'
import { getReach } from '#server/services/chart-versions.ts'
import { listModels } from '#server/services/library.ts'
import { acceptEvents } from '#server/services/walks/accept-events.ts'
import { actOn, type Draft } from './bench-hand.ts'
import type { Deps } from './demo-deps.ts'
import type { DemoPeople } from './demo-people.ts'
import { demoStories, type DemoStory } from './demo-stories.ts'

/** More pages than any route of a demo chart has: a story that goes on for longer goes in circles. */
const mostPages = 80

/** Writes the walks of the demo shop, each judged by the guard and stored by the service that takes every other one. */
export async function addDemoWalks(deps: Deps, people: DemoPeople): Promise<void> {
  const models = await listModels(deps)
  const devices = { junior: deps.newId() as DeviceId, lead: deps.newId() as DeviceId, owner: deps.newId() as DeviceId }
  for (const story of demoStories) {
    const versions = await getReach(deps, story.chart as ChartId)
    const events = tell(deps, story, versions, models, people, devices[story.by])
    const last = events.at(-1)?.at ?? deps.clock().toISOString()
    const walkId = events[0]?.walkId
    if (walkId === undefined) continue
    const { results } = await acceptEvents({ ...deps, clock: () => new Date(last) }, people[story.by], walkId, events)
    const refused = results.find(({ status }) => status !== 'appended')
    if (refused !== undefined) throw new Error(`The walk "${story.about}" was not taken: ${refused.code ?? refused.status}`)
  }
}

/** Acts a story out, page by page, until it ends or comes to where it stops. */
function tell(
  deps: Deps,
  story: DemoStory,
  versions: readonly ChartVersion[],
  models: readonly MachineModel[],
  people: DemoPeople,
  deviceId: DeviceId,
): WalkEvent[] {
  const charts = toPinnedCharts(versions)
  const { person } = people[story.by]
  const walkId = deps.newId() as WalkId
  let at = deps.clock().getTime() - story.hoursAgo * 3_600_000
  const events: WalkEvent[] = []
  let state: WalkState = newWalk

  const record = (draft: Draft): void => {
    // Type and payload of a draft belong together; the spread hides that from the compiler.
    const event = {
      id: deps.newId() as EventId,
      walkId,
      seq: events.length + 1,
      at: new Date(at).toISOString(),
      deviceId,
      personId: person.id,
      ...draft,
    } as WalkEvent
    const next = appendEvent(charts, state, event, person)
    if (!next.ok) throw new Error(`The story "${story.about}" breaks a rule at event ${event.seq} (${event.type}): ${next.error.code}`)
    state = next.value
    events.push(event)
    at += secondsOf(draft) * 1000
  }

  record(begin(story, versions, models))
  for (let pages = 0; pages < mostPages && !isAtStop(charts, state, story); pages++) {
    const drafts = actOn(toPage(charts, state), story.answers)
    if (drafts.length === 0) break
    drafts.forEach(record)
  }
  for (const draft of story.then?.(() => deps.newId() as QuestionId, people) ?? []) record(draft)
  return events
}

function begin({ chart, model: modelId, serial }: DemoStory, versions: readonly ChartVersion[], models: readonly MachineModel[]): Draft {
  const model = models.find(({ id }) => id === modelId)
  const start = versions[0]?.document.nodes.find(({ kind }) => kind === 'start')
  if (model === undefined || start === undefined) throw new Error(`The demo shop has no model ${modelId}, or no start of ${chart}.`)
  return {
    type: 'started',
    payload: {
      kind: 'bench',
      chartId: chart as ChartId,
      startId: start.id as NodeId,
      pins: Object.fromEntries(versions.map(({ chartId, version }) => [chartId, version])),
      machine: { class: model.class, engine: model.engine, modelId: model.id as ModelId, serial },
      limits: model.limits,
    },
  }
}

function secondsOf({ payload }: Draft): number {
  return 'seconds' in payload ? Math.max(5, payload.seconds) : 5
}

function isAtStop(charts: PinnedCharts, state: WalkState, { stopsAt }: DemoStory): boolean {
  const page = toPage(charts, state)
  return stopsAt !== undefined && 'node' in page && page.node.place.endsWith(`/${stopsAt}`)
}
