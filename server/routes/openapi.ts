import { z } from 'zod'
import { endpoint, type Endpoint } from '#server/http/endpoint.ts'
import { toOpenApi } from '#server/http/openapi.ts'

const documentSchema = z.looseObject({
  openapi: z.string(),
  info: z.looseObject({}),
  paths: z.record(z.string(), z.looseObject({})),
  components: z.looseObject({}),
})

/** The description of the API, itself one of its endpoints; public on purpose: it holds nothing that the sources do not. */
export function openApiEndpoint(list: () => readonly Endpoint[]): Endpoint {
  let document: z.input<typeof documentSchema> | null = null
  return endpoint({
    name: 'getOpenApi',
    summary: 'This document',
    method: 'get',
    path: '/api/openapi.json',
    role: 'anyone',
    contract: { response: documentSchema },
    run: () => {
      document ??= documentSchema.parse(toOpenApi(list()))
      return Promise.resolve(document)
    },
  })
}
