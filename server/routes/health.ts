import { getHealth } from '#shared/api/health.ts'
import { endpoint } from '#server/http/endpoint.ts'
import { AppError } from '#server/lib/app-error.ts'

export const healthEndpoints = [
  endpoint({
    name: 'getHealth',
    summary: 'Whether the server and its database answer',
    method: 'get',
    path: '/api/health',
    role: 'anyone',
    contract: getHealth,
    run: async ({ database }) => {
      if (!(await database.isAnswering())) throw new AppError('busy', 'The database does not answer.', { retryAfterSeconds: 5 })
      return { status: 'ok' as const, database: database.engine }
    },
  }),
]
