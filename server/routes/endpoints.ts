import type { Endpoint } from '#server/http/endpoint.ts'
import { chartEndpoints } from './charts.ts'
import { healthEndpoints } from './health.ts'
import { libraryEndpoints } from './library.ts'
import { openApiEndpoint } from './openapi.ts'
import { peopleEndpoints } from './people.ts'
import { sessionEndpoints } from './session.ts'
import { walkEndpoints } from './walks.ts'

/** Every endpoint there is. Express, the OpenAPI document and the role test read this list; what is not in it is not served. */
export const endpoints: readonly Endpoint[] = [
  ...healthEndpoints,
  ...sessionEndpoints,
  ...peopleEndpoints,
  ...chartEndpoints,
  ...libraryEndpoints,
  ...walkEndpoints,
  openApiEndpoint(() => endpoints),
]
