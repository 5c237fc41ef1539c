import type { z } from 'zod'
import type { Contract } from '#shared/api/contract.ts'
import type { ProblemCode } from '#shared/api/problem.ts'
import type { Role } from '#shared/trade/roles.ts'
import type { Deps } from '#server/lib/deps.ts'
import type { CurrentSession } from '#server/services/sessions.ts'
import type { Reply } from './reply.ts'

/** Who may ask: anyone at all, or a signed-in person of at least this role. */
export type Access = 'anyone' | Role

type Read<S> = S extends z.ZodType ? z.output<S> : undefined

/** One request as an endpoint sees it: every input read by the contract, nothing of Express. */
export interface Call<C extends Contract, A extends Access> {
  readonly params: Read<C['params']>
  readonly query: Read<C['query']>
  readonly body: Read<C['body']>
  /** Who asks. Read from the database for this request. */
  readonly session: A extends 'anyone' ? CurrentSession | null : CurrentSession
  /** The strong tag of If-Match, `*`, or null where there is none. */
  readonly ifMatch: string | null
  /** Network address of the other end of the connection. */
  readonly address: string
  /** How the browser calls itself. */
  readonly browser: string
  /** The account that has signed in from this very browser before, if any; read for posts alone. */
  readonly knownBrowser: { readonly browser: string; readonly person: string } | null
  readonly reply: Reply
}

interface Definition<C extends Contract, A extends Access> {
  /** Unique over all endpoints: the operationId of the OpenAPI document. */
  readonly name: string
  readonly summary: string
  readonly method: 'get' | 'post' | 'put' | 'patch' | 'delete'
  readonly path: `/api/${string}`
  readonly role: A
  readonly contract: C
  /** Status of a good answer; 200 unless it says otherwise. */
  readonly status?: 200 | 201
  /** Largest body in bytes. */
  readonly bodyMaxBytes?: number
  /** Whether a write has to name the state that it changes. */
  readonly needsIfMatch?: boolean
  /** Whether the answer names its state, for a later If-Match. */
  readonly givesEtag?: boolean
  /** Refusals beyond those that any endpoint of its form can give. */
  readonly problems?: readonly ProblemCode[]
  readonly run: (deps: Deps, call: Call<C, A>) => Promise<z.input<C['response']>>
}

/** An endpoint is a value: Express, the OpenAPI document and the role test read the same list. */
export interface Endpoint extends Omit<Definition<Contract, Access>, 'run'> {
  // Written as a method so that an endpoint of any contract fits in the one list.
  run(deps: Deps, call: Call<Contract, Access>): Promise<unknown>
}

/** Checks an endpoint against its own contract and forgets the particular types. */
export function endpoint<C extends Contract, A extends Access>(definition: Definition<C, A>): Endpoint {
  return definition as unknown as Endpoint
}

/** The answer of an act that has nothing to say but that it is done. */
export const done = { done: true } as const
