import type { Session } from '#shared/api/session.ts'
import { getSession } from '#shared/api/session.ts'
import { personIdSchema } from '#shared/lib/ids.ts'
import type { Role } from '#shared/trade/roles.ts'

import type { FakeEndpoint } from './fake-api.ts'
import { ok } from './fake-api.ts'

export const personId = (number: number) => personIdSchema.parse(`00000000-0000-7000-8000-${String(number).padStart(12, '0')}`)

const people: Readonly<Record<Role, { readonly number: number; readonly name: string }>> = {
  junior: { number: 3, name: 'Mara Kessler' },
  lead: { number: 2, name: 'Tomas Brandt' },
  owner: { number: 1, name: 'Ines Okafor' },
}

/** A session of somebody in a role, or of nobody. */
export function buildSession(role: Role | null, more: Partial<Session> = {}): Session {
  return {
    person: role === null ? null : { id: personId(people[role].number), name: people[role].name, email: `${role}@shop.example`, role },
    shop: { name: 'Test Bench', numberFormat: { decimal: '.', group: 'space' } },
    needsOwner: false,
    demoSignIns: [],
    ...more,
  }
}

/** GET /api/session, answering with what stands in the holder at that moment. */
export function sessionEndpoint(holder: { session: Session }): FakeEndpoint {
  return { method: 'GET', path: '/api/session', contract: getSession, answer: () => ok(holder.session) }
}
