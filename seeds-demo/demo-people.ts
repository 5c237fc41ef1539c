import type { Role } from '#shared/trade/roles.ts'
import { demoSignIns } from '#server/services/demo-sign-ins.ts'
import { createFirstOwner, makeOwnerCode } from '#server/services/first-owner.ts'
import { acceptLink } from '#server/services/links.ts'
import { addPerson, getPersonById } from '#server/services/people.ts'
import { endSession, type CurrentSession } from '#server/services/sessions.ts'
import type { Deps } from './demo-deps.ts'

/** The people of the demo shop, each as the services see who asks. */
export type DemoPeople = Readonly<Record<Role, CurrentSession>>

/** The owner comes by the one-time code, the others by the links that the owner hands over; nobody stays signed in. */
export async function addDemoPeople(deps: Deps): Promise<DemoPeople> {
  const owner = await addOwner(deps)
  return { owner, lead: await addByLink(deps, owner, 'lead'), junior: await addByLink(deps, owner, 'junior') }
}

function signInOf(role: Role) {
  const found = demoSignIns.find((one) => one.role === role)
  if (found === undefined) throw new Error(`The demo shop has no ${role}.`)
  return found
}

async function actAs(deps: Deps, personId: CurrentSession['person']['id']): Promise<CurrentSession> {
  const person = await getPersonById(deps, personId)
  if (person === null) throw new Error('A person of the demo shop is missing.')
  return { id: deps.newId(), person }
}

async function addOwner(deps: Deps): Promise<CurrentSession> {
  const made = await makeOwnerCode(deps)
  if (made === null) throw new Error('The demo shop has an owner already.')
  const started = await createFirstOwner(deps, { ...signInOf('owner'), code: made.code, address: 'demo', browser: '' })
  await endSession(deps, started.id)
  return actAs(deps, started.personId)
}

async function addByLink(deps: Deps, owner: CurrentSession, role: Role): Promise<CurrentSession> {
  const { password, ...given } = signInOf(role)
  const { person, link } = await addPerson(deps, owner, given)
  await acceptLink(deps, link.url.slice(link.url.lastIndexOf('/') + 1), password)
  return actAs(deps, person.id)
}
