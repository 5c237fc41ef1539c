import express, { Router, type Request, type Response } from 'express'
import { hasRole } from '#shared/trade/roles.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import type { CurrentSession } from '#server/services/sessions.ts'
import { checkAnswer } from './answer.ts'
import { createCookies, type Cookies } from './cookies.ts'
import type { Access, Call, Endpoint } from './endpoint.ts'
import type { Contract } from '#shared/api/contract.ts'
import { readInput } from './faults.ts'
import { DoorError } from './refuse.ts'
import { checkSameOrigin } from './same-origin.ts'

/** Largest body where an endpoint says nothing else. */
export const usualBodyMaxBytes = 64_000

/** The routes of the list, and of nothing else: any other method at a known address is refused by name. */
export function createRouter(deps: Deps, endpoints: readonly Endpoint[]): Router {
  const router = Router({ caseSensitive: true, strict: true })
  const cookies = createCookies(deps)
  for (const [path, list] of groupByPath(endpoints)) {
    const route = router.route(path)
    for (const endpoint of list) route[endpoint.method](createHandler(deps, cookies, endpoint))
    const allowed = list.map(({ method }) => method.toUpperCase()).join(', ')
    route.all((request, response) => {
      response.set('Allow', allowed)
      throw new AppError('method-not-allowed', `${request.method} is not possible here, only ${allowed}.`)
    })
  }
  return router
}

function groupByPath(endpoints: readonly Endpoint[]): ReadonlyMap<string, readonly Endpoint[]> {
  const groups = new Map<string, Endpoint[]>()
  for (const endpoint of endpoints) groups.set(endpoint.path, [...(groups.get(endpoint.path) ?? []), endpoint])
  return groups
}

function createHandler(deps: Deps, cookies: Cookies, endpoint: Endpoint) {
  const parseJson = express.json({ limit: endpoint.bodyMaxBytes ?? usualBodyMaxBytes, strict: false, inflate: false, type: 'application/json' })

  return async (request: Request, response: Response): Promise<void> => {
    response.locals['endpoint'] = endpoint
    if (endpoint.method !== 'get') checkSameOrigin(deps, request)
    const session = await cookies.readSession(request)
    response.locals['personId'] = session?.person.id ?? null
    authorise(endpoint.role, session)
    const inputs = await readInputs(endpoint, request, response, parseJson)
    const pending: Promise<void>[] = []
    const answer = await endpoint.run(deps, {
      ...inputs,
      // `authorise` has made sure that somebody is signed in wherever the endpoint's type says so.
      session: session as CurrentSession,
      ifMatch: request.get('if-match') ?? null,
      address: request.ip ?? 'unknown',
      browser: (request.get('user-agent') ?? '').slice(0, 500),
      knownBrowser: endpoint.method === 'post' ? await cookies.readKnownBrowser(request) : null,
      reply: {
        etag: (tag) => void response.set('ETag', tag),
        startSession: (started) => void pending.push(cookies.startSession(response, started)),
        endSession: () => {
          cookies.endSession(response)
        },
      },
    })
    await Promise.all(pending)
    // The time limit may have answered in our place.
    if (!response.headersSent) response.status(endpoint.status ?? 200).json(checkAnswer(deps, endpoint, answer))
  }
}

function authorise(role: Access, session: CurrentSession | null): void {
  if (role === 'anyone') return
  if (session === null)
    throw new AppError('signed-out', 'Nobody is signed in here, or the sign-in has ended. Sign in and go on: what this device keeps stays on it.')
  if (!hasRole(session.person.role, role))
    throw new AppError('not-allowed', `This is for the ${role === 'owner' ? 'owner' : 'lead or the owner'} of the shop. Ask them.`)
}

type Inputs = Pick<Call<Contract, Access>, 'params' | 'query' | 'body'>
type BodyParser = ReturnType<typeof express.json>

async function readInputs({ contract }: Endpoint, request: Request, response: Response, parseJson: BodyParser): Promise<Inputs> {
  const params = contract.params ? readInput(contract.params, request.params) : { data: undefined }
  if ('faults' in params) throw new AppError('not-found', "There is nothing at this address: a part of it can't be an id.")
  const query = contract.query ? readInput(contract.query, request.query, ['query']) : { data: undefined }
  if ('faults' in query) throw new AppError('invalid-input', 'Part of the address behind the question mark was not understood.', { errors: query.faults })
  return { params: params.data, query: query.data, body: await readBody(contract, request, response, parseJson) } as Inputs
}

async function readBody({ body: schema }: Contract, request: Request, response: Response, parseJson: BodyParser): Promise<unknown> {
  if (!schema) {
    if (!isBodyless(request) && !isJson(request)) throw wrongType()
    return undefined
  }
  if (!isJson(request)) throw wrongType()
  await new Promise<void>((resolve, reject) => {
    parseJson(request, response, (error?: unknown) => {
      if (error === undefined) resolve()
      else reject(error instanceof Error ? error : new Error('The body could not be read.', { cause: error }))
    })
  })
  const read = readInput(schema, request.body)
  if ('faults' in read)
    throw new AppError(
      'invalid-input',
      read.faults.length === 1
        ? 'One thing was not understood; nothing was changed.'
        : `${read.faults.length} things were not understood; nothing was changed.`,
      { errors: read.faults },
    )
  return read.data
}

function isJson(request: Request): boolean {
  return /^application\/json\s*(;\s*charset="?utf-8"?\s*)?$/i.test(request.get('content-type') ?? '')
}

function isBodyless(request: Request): boolean {
  return (
    request.method === 'GET' || request.method === 'HEAD' || (request.get('content-type') === undefined && Number(request.get('content-length') ?? 0) === 0)
  )
}

function wrongType(): DoorError {
  return new DoorError(415, 'not-json', 'Send JSON in UTF-8, with the content type application/json.')
}
