import { and, asc, eq, gt, isNotNull, ne, sql } from 'drizzle-orm'
import type { Colleague, Person } from '#shared/api/people.ts'
import type { SignedIn } from '#shared/api/session.ts'
import type { PersonId } from '#shared/lib/ids.ts'
import type { Role } from '#shared/trade/roles.ts'
import type { Db } from '#server/db/client.ts'
import { oneTimeLinks, people } from '#server/db/schema/people.ts'
import { isUniqueViolation } from '#server/db/sql-state.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { writeAudit } from './audit.ts'
import { makeLink, type HandedLink } from './links.ts'
import { endSessionsOf, type CurrentSession } from './sessions.ts'

type PersonRow = typeof people.$inferSelect

function toPerson(row: PersonRow, linkExpiresAt: Date | null): Person {
  return {
    id: row.id,
    name: row.name,
    email: row.email,
    role: row.role,
    status: row.isActive ? (row.passwordHash === null ? 'invited' : 'active') : 'deactivated',
    linkExpiresAt: linkExpiresAt?.toISOString() ?? null,
    lastSeenAt: row.lastSeenAt?.toISOString() ?? null,
  }
}

function selectPeople(db: Db, deps: Deps) {
  const alive = and(eq(oneTimeLinks.personId, people.id), sql`${oneTimeLinks.usedAt} is null`, gt(oneTimeLinks.expiresAt, deps.clock()))
  return db.select({ person: people, linkExpiresAt: oneTimeLinks.expiresAt }).from(people).leftJoin(oneTimeLinks, alive)
}

const byName = [asc(sql`lower(${people.name})`), asc(people.id)]

/** Everybody of the shop, the deactivated included. */
export async function listPeople(deps: Deps): Promise<Person[]> {
  const rows = await selectPeople(deps.db, deps).orderBy(...byName)
  return rows.map(({ person, linkExpiresAt }) => toPerson(person, linkExpiresAt))
}

/** Everybody who can sign in now, with nothing of theirs but name and role. */
export async function listActivePeople(deps: Deps): Promise<Colleague[]> {
  const canSignIn = and(eq(people.isActive, true), isNotNull(people.passwordHash))
  return deps.db
    .select({ id: people.id, name: people.name, role: people.role })
    .from(people)
    .where(canSignIn)
    .orderBy(...byName)
}

async function getPerson(db: Db, deps: Deps, id: PersonId): Promise<{ row: PersonRow; person: Person }> {
  const [found] = await selectPeople(db, deps).where(eq(people.id, id)).limit(1)
  if (found === undefined) throw new AppError('not-found', 'There is nobody by this id in the shop.')
  return { row: found.person, person: toPerson(found.person, found.linkExpiresAt) }
}

/** Adds a person, who sets a password through the link. */
export async function addPerson(
  deps: Deps,
  by: CurrentSession,
  { name, email, role }: { name: string; email: string; role: Role },
): Promise<{ person: Person; link: HandedLink }> {
  const id = deps.newId() as PersonId
  try {
    return await deps.db.transaction(async (tx) => {
      await tx.insert(people).values({ id, name, email, role, createdAt: deps.clock() })
      const link = await makeLink(tx, deps, { id, passwordHash: null })
      await writeAudit(tx, deps, { act: 'person-added', personId: by.person.id, subject: id, detail: { role } })
      return { person: (await getPerson(tx, deps, id)).person, link }
    })
  } catch (error) {
    if (!isUniqueViolation(error, 'people_email_key')) throw error
    const detail = 'Somebody of the shop has this e-mail address already.'
    throw new AppError('e-mail-taken', detail, { errors: [{ pointer: '#/email', detail }] })
  }
}

type PersonChange = { readonly name?: string | undefined; readonly role?: Role | undefined; readonly isActive?: boolean | undefined }

/** Changes a person; it holds from their next request on. The last owner stays an owner, and active. */
export async function updatePerson(deps: Deps, by: CurrentSession, id: PersonId, change: PersonChange): Promise<Person> {
  return deps.db.transaction(async (tx) => {
    // All owners are locked, so that two owners can't demote each other at the same moment.
    await tx.select({ id: people.id }).from(people).where(eq(people.role, 'owner')).orderBy(people.id).for('update')
    const { row } = await getPerson(tx, deps, id)
    const role = change.role ?? row.role
    const isActive = change.isActive ?? row.isActive
    if (row.role === 'owner' && row.isActive && (role !== 'owner' || !isActive)) await keepAnOwner(tx, id)
    await tx
      .update(people)
      .set({ name: change.name ?? row.name, role, isActive })
      .where(eq(people.id, id))
    if (!isActive) {
      await endSessionsOf(tx, id)
      await tx.delete(oneTimeLinks).where(eq(oneTimeLinks.personId, id))
    }
    await writeAudit(tx, deps, { act: 'person-changed', personId: by.person.id, subject: id, detail: { role, isActive, renamed: change.name !== undefined } })
    return (await getPerson(tx, deps, id)).person
  })
}

async function keepAnOwner(tx: Db, exceptId: PersonId): Promise<void> {
  const others = await tx
    .select({ id: people.id })
    .from(people)
    .where(and(eq(people.role, 'owner'), eq(people.isActive, true), ne(people.id, exceptId), sql`${people.passwordHash} is not null`))
    .limit(1)
  if (others.length === 0) throw new AppError('last-owner', 'This is the only owner who can sign in. Make somebody else an owner first.')
}

/** A new one-time link for a person; earlier ones die. */
export async function createLink(deps: Deps, by: CurrentSession, id: PersonId): Promise<{ person: Person; link: HandedLink }> {
  return deps.db.transaction(async (tx) => {
    const { row } = await getPerson(tx, deps, id)
    if (!row.isActive) throw new AppError('not-found', 'This person is deactivated. Activate them first, then make the link.')
    const link = await makeLink(tx, deps, row)
    await writeAudit(tx, deps, { act: 'link-made', personId: by.person.id, subject: id })
    return { person: (await getPerson(tx, deps, id)).person, link }
  })
}

/** Somebody who is signed in, as everyone may see them. */
export async function getPersonById(deps: Deps, id: PersonId): Promise<SignedIn | null> {
  const [row] = await deps.db.select({ id: people.id, name: people.name, email: people.email, role: people.role }).from(people).where(eq(people.id, id))
  return row ?? null
}
