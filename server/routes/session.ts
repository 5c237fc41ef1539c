import * as api from '#shared/api/session.ts'
import { done, endpoint } from '#server/http/endpoint.ts'
import { createFirstOwner } from '#server/services/first-owner.ts'
import { changePassword } from '#server/services/passwords.ts'
import { endOwnSession, endSession, listOwnSessions } from '#server/services/sessions.ts'
import { describeSession } from '#server/services/shop.ts'
import { signIn } from '#server/services/sign-in.ts'
import { getPersonById } from '#server/services/people.ts'

export const sessionEndpoints = [
  endpoint({
    name: 'getSession',
    summary: 'Who is signed in, in which shop',
    method: 'get',
    path: '/api/session',
    role: 'anyone',
    contract: api.getSession,
    run: (deps, { session }) => describeSession(deps, session?.person ?? null),
  }),
  endpoint({
    name: 'signIn',
    summary: 'Sign in with e-mail and password',
    method: 'post',
    path: '/api/session',
    role: 'anyone',
    contract: api.signIn,
    problems: ['wrong-sign-in', 'too-many-tries', 'demo-only'],
    run: async (deps, { body, address, browser, knownBrowser, session, reply }) => {
      const started = await signIn(deps, { ...body, address, browser, knownBrowser, oldSessionId: session?.id ?? null })
      reply.startSession(started)
      return describeSession(deps, await getPersonById(deps, started.personId))
    },
  }),
  endpoint({
    name: 'signOut',
    summary: 'Sign out: the session ends on the server',
    method: 'delete',
    path: '/api/session',
    role: 'anyone',
    contract: api.signOut,
    run: async (deps, { session, reply }) => {
      if (session) await endSession(deps, session.id)
      reply.endSession()
      return describeSession(deps, null)
    },
  }),
  endpoint({
    name: 'changePassword',
    summary: "Change one's own password; ends one's other sessions",
    method: 'put',
    path: '/api/session/password',
    role: 'junior',
    contract: api.changePassword,
    problems: ['wrong-present-password', 'weak-password', 'too-many-tries'],
    run: async (deps, { body, session }) => {
      await changePassword(deps, session, body)
      return done
    },
  }),
  endpoint({
    name: 'listSessions',
    summary: 'Where one is signed in',
    method: 'get',
    path: '/api/sessions',
    role: 'junior',
    contract: api.listSessions,
    run: async (deps, { session }) => ({ sessions: await listOwnSessions(deps, session) }),
  }),
  endpoint({
    name: 'endSession',
    summary: "End one of one's own sessions",
    method: 'delete',
    path: '/api/sessions/:id',
    role: 'junior',
    contract: api.endSession,
    run: async (deps, { params, session }) => {
      await endOwnSession(deps, session.person.id, params.id)
      return done
    },
  }),
  endpoint({
    name: 'createFirstOwner',
    summary: 'The first owner, with the one-time code that the server printed',
    method: 'post',
    path: '/api/owner',
    role: 'anyone',
    contract: api.createFirstOwner,
    status: 201,
    problems: ['wrong-code', 'already-set-up', 'weak-password', 'too-many-tries'],
    run: async (deps, { body, address, browser, reply }) => {
      const started = await createFirstOwner(deps, { ...body, address, browser })
      reply.startSession(started)
      return describeSession(deps, await getPersonById(deps, started.personId))
    },
  }),
]
