import * as api from '#shared/api/walks.ts'
import { endpoint } from '#server/http/endpoint.ts'
import { acceptEvents, startWalk } from '#server/services/walks/accept-events.ts'
import { getWalkLog, listSideEvents, listWalkRows } from '#server/services/walks/read-walks.ts'

/** A batch of the most events, each with the longest note that there may be. */
const batchMaxBytes = 8_000_000

export const walkEndpoints = [
  endpoint({
    name: 'listWalks',
    summary: "One's own walks; a lead may ask for the shop's",
    method: 'get',
    path: '/api/walks',
    role: 'junior',
    contract: api.listWalks,
    problems: ['not-allowed'],
    run: (deps, { query, session }) => listWalkRows(deps, session, query),
  }),
  endpoint({
    name: 'startWalk',
    summary: 'Start a walk: the same as appending event 1',
    method: 'post',
    path: '/api/walks',
    role: 'junior',
    contract: api.startWalk,
    problems: ['wrong-walk', 'walk-exists'],
    run: (deps, { body, session }) => startWalk(deps, session, body.id, body.event),
  }),
  endpoint({
    name: 'getWalk',
    summary: 'The log of a walk with all that replay needs',
    method: 'get',
    path: '/api/walks/:id',
    role: 'junior',
    contract: api.getWalk,
    run: (deps, { params, session }) => getWalkLog(deps, session, params.id),
  }),
  endpoint({
    name: 'postEvents',
    summary: 'Append a batch of events, idempotent by event id; what became of each is in the answer',
    method: 'post',
    path: '/api/walks/:id/events',
    role: 'junior',
    contract: api.postEvents,
    bodyMaxBytes: batchMaxBytes,
    problems: ['wrong-walk'],
    run: (deps, { params, body, session }) => acceptEvents(deps, session, params.id, body.events),
  }),
  endpoint({
    name: 'listSideEvents',
    summary: "Events that did not make it into the log: one's own, everybody's for a lead",
    method: 'get',
    path: '/api/walks/:id/side-events',
    role: 'junior',
    contract: api.listSideEvents,
    run: async (deps, { params, session }) => ({ sideEvents: await listSideEvents(deps, session, params.id) }),
  }),
]
