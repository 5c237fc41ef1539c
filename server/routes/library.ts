import * as api from '#shared/api/models.ts'
import { endpoint } from '#server/http/endpoint.ts'
import { listCauses, listModels } from '#server/services/library.ts'

export const libraryEndpoints = [
  endpoint({
    name: 'listModels',
    summary: 'Equipment models with their spec sheets',
    method: 'get',
    path: '/api/models',
    role: 'junior',
    contract: api.listModels,
    run: async (deps) => ({ models: await listModels(deps) }),
  }),
  endpoint({
    name: 'listCauses',
    summary: "The shop's library of causes, contributing ones included",
    method: 'get',
    path: '/api/causes',
    role: 'junior',
    contract: api.listCauses,
    run: async (deps) => ({ causes: await listCauses(deps) }),
  }),
]
