import type { ChartVersion } from '#shared/api/charts.ts'
import { getReach, searchSymptoms } from '#shared/api/charts.ts'
import { listModels } from '#shared/api/models.ts'
import type { BatchResult, WalkRow } from '#shared/api/walks.ts'
import { getWalk, listSideEvents, listWalks, postEvents, startWalk } from '#shared/api/walks.ts'
import type { ChartDocument } from '#shared/chart/document.ts'
import type { EventId, WalkId } from '#shared/lib/ids.ts'
import { equipmentClassWords } from '#shared/trade/equipment.ts'
import type { EventOf, WalkEvent } from '#shared/walk/events.ts'
import { toPinnedCharts } from '#shared/walk/pinned-charts.ts'
import { appendEvent, replay } from '#shared/walk/replay.ts'
import { isOpen, type StartedWalk } from '#shared/walk/state.ts'
import { getDeviceId } from '#src/lib/device.ts'

import type { FakeEndpoint } from './fake-api.ts'
import { ok, problem } from './fake-api.ts'
import { personId } from './session-builder.ts'
import { saw, uuid } from './walk-builder.ts'

let walksSoFar = 0

/** Each story has a walk of its own: what a browser still holds of another one stays out of it. */
function nextWalkId(): WalkId {
  walksSoFar += 1
  return uuid(0x10_000 + walksSoFar) as WalkId
}

const at = '2026-03-02T09:00:00.000Z'
const junior = { id: personId(3), role: 'junior' as const }
const names = { [personId(3)]: 'Mara Kessler', [personId(2)]: 'Tomas Brandt', [personId(1)]: 'Ines Okafor' }

/** A server with one walk in memory, judged by the product's own guard. What is not the walk's business it does not know. */
export class FakeBench {
  readonly walkId = nextWalkId()
  readonly versions: readonly ChartVersion[]
  readonly side: { readonly event: WalkEvent; readonly status: 'fork' | 'refused'; readonly code: string; readonly receivedAt: string }[] = []
  log: WalkEvent[] = []
  /** The server does not answer. */
  isDown = false
  /** The server stores, and its answer gets lost. */
  losesAnswers = false
  /** It refuses to read anything. */
  refusesToRead = false

  constructor(...documents: readonly ChartDocument[]) {
    this.versions = documents.map((document) => ({
      chartId: document.id,
      version: 1,
      document,
      publishedAt: at,
      publishedBy: 'Tomas Brandt',
      changeNote: 'First version',
    }))
  }

  get charts() {
    return toPinnedCharts(this.versions)
  }

  get walk(): StartedWalk {
    const state = replay(this.charts, this.log)
    if (state.phase === 'new') throw new Error('The walk of this story has not begun.')
    return state
  }

  /** The walk begins on this device, in the junior's hands. */
  begin(limits: EventOf<'started'>['payload']['limits'] = {}): this {
    const first = this.versions[0]
    if (first === undefined) throw new Error('This bench has no chart.')
    const pins = Object.fromEntries(this.versions.map(({ chartId }) => [chartId, 1])) as EventOf<'started'>['payload']['pins']
    const payload: EventOf<'started'>['payload'] = {
      kind: 'bench',
      chartId: first.chartId,
      startId: 's' as EventOf<'started'>['payload']['startId'],
      pins,
      machine: saw,
      limits,
    }
    this.append([{ id: uuid(100) as EventId, walkId: this.walkId, seq: 1, at, deviceId: getDeviceId(), personId: junior.id, type: 'started', payload }])
    return this
  }

  /** Judges a batch in order, as the server does: the first bad event gets `refused` or `fork`, all later ones `fork`. */
  append(batch: readonly WalkEvent[]): BatchResult {
    let isBroken = false
    const results = batch.map((event): BatchResult['results'][number] => {
      if (this.log.some(({ id }) => id === event.id)) return { id: event.id, status: 'duplicate' }
      const aside = this.side.find((each) => each.event.id === event.id)
      if (aside !== undefined) {
        isBroken = true
        return { id: event.id, status: aside.status, code: aside.code }
      }
      if (!isBroken && event.seq > this.log.length + 1) return { id: event.id, status: 'gap' }
      const next = isBroken ? null : appendEvent(this.charts, replay(this.charts, this.log), event)
      if (next?.ok === true) {
        this.log = [...this.log, event]
        return { id: event.id, status: 'appended' }
      }
      const code = next === null ? 'after-refused' : next.error.code
      const status = next === null || ['other-device', 'other-person', 'wrong-seq'].includes(code) ? 'fork' : 'refused'
      isBroken = true
      this.side.push({ event, status, code, receivedAt: at })
      return { id: event.id, status, code }
    })
    return { results, lastSeq: this.log.length }
  }

  get row(): WalkRow {
    const { walk } = this
    const chart = this.versions.find(({ chartId }) => walk.start.startsWith(`${chartId}/`))
    if (chart === undefined) throw new Error('The walk started in no chart of this bench.')
    const holder = names[walk.holder.personId] ?? 'nobody'
    return {
      id: walk.walkId,
      kind: walk.kind,
      chartId: chart.chartId,
      chartTitle: chart.document.title,
      version: 1,
      machine: walk.machine,
      machineTitle: equipmentClassWords[walk.machine.class],
      phase: walk.phase,
      isPaused: walk.isPaused,
      isOpen: isOpen(walk),
      standsAt: walk.node,
      minutesUsed: walk.minutesUsed,
      causeTitle: null,
      hasQuestion: walk.questions.some(({ answer }) => answer === null),
      startedBy: { id: walk.startedBy, name: names[walk.startedBy] ?? 'nobody' },
      heldBy: { personId: walk.holder.personId, name: holder, deviceId: walk.holder.deviceId },
      startedAt: walk.startedAt,
      lastEventAt: this.log.at(-1)?.at ?? at,
      lastSeq: walk.lastSeq,
    }
  }

  get detail() {
    return { walk: this.row, events: this.log, charts: [...this.versions], people: names, lastSeq: this.log.length }
  }

  /** A batch over the wire, with whatever is wrong with the wire. */
  async post(batch: readonly WalkEvent[]): Promise<BatchResult> {
    if (this.isDown) throw new TypeError('Failed to fetch')
    const answer = this.append(batch)
    if (this.losesAnswers) throw new TypeError('Failed to fetch')
    return answer
  }

  readonly endpoints: readonly FakeEndpoint[] = [
    { method: 'GET', path: /^\/api\/walks\/[0-9a-f-]{36}$/, contract: getWalk, answer: () => ok(this.detail) },
    { method: 'GET', path: /^\/api\/walks\/[0-9a-f-]{36}\/side-events$/, contract: listSideEvents, answer: () => ok({ sideEvents: this.side }) },
    {
      method: 'POST',
      path: /^\/api\/walks\/[0-9a-f-]{36}\/events$/,
      contract: postEvents,
      answer: async (body) => {
        if (this.refusesToRead) return problem(413, 'too-large', 'This is too large to be read.')
        return ok(await this.post(postEvents.body.parse(body).events))
      },
    },
    { method: 'POST', path: '/api/walks', contract: startWalk, answer: async (body) => ok(await this.post([startWalk.body.parse(body).event])) },
    {
      method: 'GET',
      path: /^\/api\/walks(\?.*)?$/,
      contract: listWalks,
      answer: () => ok({ walks: this.log.length > 0 && this.row.isOpen ? [this.row] : [], page: 1, hasMore: false }),
    },
    { method: 'GET', path: /^\/api\/charts\/[^/]+\/reach$/, contract: getReach, answer: () => ok({ charts: [...this.versions] }) },
    { method: 'GET', path: '/api/models', contract: listModels, answer: () => ok({ models: [] }) },
    {
      method: 'GET',
      path: /^\/api\/symptoms/,
      contract: searchSymptoms,
      answer: () =>
        ok({
          symptoms: this.versions.flatMap(({ chartId, document }) =>
            document.nodes.flatMap((node) =>
              node.kind === 'start'
                ? [
                    {
                      chartId,
                      version: 1,
                      startId: node.id,
                      title: node.title ?? document.title,
                      chartTitle: document.title,
                      matched: null,
                      classes: document.appliesTo?.classes ?? [],
                      engines: document.appliesTo?.engines ?? [],
                    },
                  ]
                : [],
            ),
          ),
        }),
    },
  ]
}
