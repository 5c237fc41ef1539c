import * as api from '#shared/api/charts.ts'
import { endpoint } from '#server/http/endpoint.ts'
import { getReach, getVersion } from '#server/services/chart-versions.ts'
import { listCharts } from '#server/services/charts.ts'
import { createChart, getDraft, saveDraft, toTag } from '#server/services/drafts.ts'
import { checkChart, publishDraft } from '#server/services/publish.ts'
import { searchSymptoms } from '#server/services/symptoms.ts'

/** A document in its wrapping. */
const chartBodyMaxBytes = api.chartMaxBytes + 1_000
const documentProblems = ['not-a-chart', 'too-new', 'invalid-chart'] as const

export const chartEndpoints = [
  endpoint({
    name: 'listCharts',
    summary: 'The charts; unpublished ones for a lead',
    method: 'get',
    path: '/api/charts',
    role: 'junior',
    contract: api.listCharts,
    run: async (deps, { session }) => ({ charts: await listCharts(deps, session) }),
  }),
  endpoint({
    name: 'createChart',
    summary: 'A new chart, as a draft',
    method: 'post',
    path: '/api/charts',
    role: 'lead',
    givesEtag: true,
    contract: api.createChart,
    status: 201,
    bodyMaxBytes: chartBodyMaxBytes,
    problems: [...documentProblems, 'chart-exists'],
    run: async (deps, { body, session, reply }) => {
      const draft = await createChart(deps, session, body.document)
      reply.etag(toTag(draft.revision))
      return draft
    },
  }),
  endpoint({
    name: 'checkChart',
    summary: 'What the chart check says; nothing is stored',
    method: 'post',
    path: '/api/charts/check',
    role: 'lead',
    contract: api.checkChart,
    bodyMaxBytes: chartBodyMaxBytes,
    problems: documentProblems,
    run: async (deps, { body }) => ({ remarks: await checkChart(deps, body.document) }),
  }),
  endpoint({
    name: 'getVersion',
    summary: 'A published version with its document',
    method: 'get',
    path: '/api/charts/:id/versions/:n',
    role: 'junior',
    contract: api.getVersion,
    run: (deps, { params }) => getVersion(deps, { chartId: params.id, version: params.n }),
  }),
  endpoint({
    name: 'getReach',
    summary: 'The newest version of a chart and of every chart in its reach: what a walk pins',
    method: 'get',
    path: '/api/charts/:id/reach',
    role: 'junior',
    contract: api.getReach,
    run: async (deps, { params }) => ({ charts: await getReach(deps, params.id) }),
  }),
  endpoint({
    name: 'getDraft',
    summary: 'The draft of a chart; its ETag names the state',
    method: 'get',
    path: '/api/charts/:id/draft',
    role: 'lead',
    givesEtag: true,
    contract: api.getDraft,
    run: async (deps, { params, reply }) => {
      const draft = await getDraft(deps, params.id)
      reply.etag(toTag(draft.revision))
      return draft
    },
  }),
  endpoint({
    name: 'saveDraft',
    summary: 'Save a draft over the state that If-Match names',
    method: 'put',
    path: '/api/charts/:id/draft',
    role: 'lead',
    givesEtag: true,
    contract: api.saveDraft,
    bodyMaxBytes: chartBodyMaxBytes,
    needsIfMatch: true,
    problems: [...documentProblems, 'if-match-missing', 'draft-moved-on'],
    run: async (deps, { params, body, session, ifMatch, reply }) => {
      const draft = await saveDraft(deps, session, { chartId: params.id, json: body.document, ifMatch })
      reply.etag(toTag(draft.revision))
      return draft
    },
  }),
  endpoint({
    name: 'publishDraft',
    summary: 'Publish a draft as the next version',
    method: 'post',
    path: '/api/charts/:id/publish',
    role: 'lead',
    contract: api.publishDraft,
    status: 201,
    problems: ['draft-moved-on', 'chart-has-errors', 'warnings-unseen', 'already-published'],
    run: (deps, { params, body, session }) => publishDraft(deps, session, { chartId: params.id, ...body }),
  }),
  endpoint({
    name: 'searchSymptoms',
    summary: 'Symptoms by what somebody calls them',
    method: 'get',
    path: '/api/symptoms',
    role: 'junior',
    contract: api.searchSymptoms,
    run: async (deps, { query }) => ({ symptoms: await searchSymptoms(deps, query.q ?? '') }),
  }),
]
