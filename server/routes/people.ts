import * as api from '#shared/api/people.ts'
import { done, endpoint } from '#server/http/endpoint.ts'
import { acceptLink, readLink } from '#server/services/links.ts'
import { addPerson, createLink, listActivePeople, listPeople, updatePerson } from '#server/services/people.ts'

export const peopleEndpoints = [
  endpoint({
    name: 'listPeople',
    summary: 'Everybody of the shop',
    method: 'get',
    path: '/api/people',
    role: 'owner',
    contract: api.listPeople,
    run: async (deps) => ({ people: await listPeople(deps) }),
  }),
  // Before the addresses with an id in them, which would take the word for one.
  endpoint({
    name: 'listActivePeople',
    summary: 'Who can sign in now: name and role alone',
    method: 'get',
    path: '/api/people/active',
    role: 'junior',
    contract: api.listActivePeople,
    run: async (deps) => ({ people: await listActivePeople(deps) }),
  }),
  endpoint({
    name: 'addPerson',
    summary: 'Add a person; the answer holds the one-time link to hand over',
    method: 'post',
    path: '/api/people',
    role: 'owner',
    contract: api.addPerson,
    status: 201,
    problems: ['e-mail-taken'],
    run: (deps, { body, session }) => addPerson(deps, session, body),
  }),
  endpoint({
    name: 'updatePerson',
    summary: 'Rename a person, change their role, deactivate or activate them',
    method: 'patch',
    path: '/api/people/:id',
    role: 'owner',
    contract: api.updatePerson,
    problems: ['last-owner'],
    run: async (deps, { params, body, session }) => ({ person: await updatePerson(deps, session, params.id, body) }),
  }),
  endpoint({
    name: 'createLink',
    summary: 'A new one-time link for a person; earlier ones die',
    method: 'post',
    path: '/api/people/:id/link',
    role: 'owner',
    contract: api.createLink,
    run: (deps, { params, session }) => createLink(deps, session, params.id),
  }),
  endpoint({
    name: 'getLink',
    summary: 'Whom a one-time link is for; changes nothing',
    method: 'get',
    path: '/api/links/:token',
    role: 'anyone',
    contract: api.getLink,
    problems: ['link-used-up'],
    run: (deps, { params }) => readLink(deps, params.token),
  }),
  endpoint({
    name: 'useLink',
    summary: 'Set the password by a one-time link, once',
    method: 'post',
    path: '/api/links/:token',
    role: 'anyone',
    contract: api.useLink,
    problems: ['link-used-up', 'weak-password'],
    run: async (deps, { params, body }) => {
      await acceptLink(deps, params.token, body.password)
      return done
    },
  }),
]
