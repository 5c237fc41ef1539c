import { and, eq, gt, isNull, ne } from 'drizzle-orm'
import type { PersonId } from '#shared/lib/ids.ts'
import type { Db } from '#server/db/client.ts'
import { oneTimeLinks, people } from '#server/db/schema/people.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { writeAudit } from './audit.ts'
import { checkPassword } from './password-rules.ts'
import { endSessionsOf, hashSecret } from './sessions.ts'
import { readShopName } from './shop.ts'

/** An invitation waits for somebody who may be away for the week; a reset is asked for by somebody who is standing there. */
const lifetimeSeconds = { invite: 7 * 86_400, reset: 30 * 60 } as const

/** A link as it is shown once, to the owner who made it. */
export interface HandedLink {
  readonly url: string
  readonly expiresAt: string
}

/** Makes a one-time link for a person; links made for them earlier die. Whoever has set no password is invited, others reset theirs. */
export async function makeLink(tx: Db, deps: Deps, person: { id: PersonId; passwordHash: string | null }): Promise<HandedLink> {
  const now = deps.clock()
  const purpose = person.passwordHash === null ? 'invite' : 'reset'
  const token = deps.randomToken(32)
  const expiresAt = new Date(now.getTime() + lifetimeSeconds[purpose] * 1000)
  await tx.delete(oneTimeLinks).where(eq(oneTimeLinks.personId, person.id))
  await tx.insert(oneTimeLinks).values({ id: deps.newId(), purpose, personId: person.id, tokenHash: hashSecret(token), createdAt: now, expiresAt })
  return { url: `${deps.config.publicUrl}/link/${token}`, expiresAt: expiresAt.toISOString() }
}

const usable = (deps: Deps, token: string) =>
  and(
    eq(oneTimeLinks.tokenHash, hashSecret(token)),
    ne(oneTimeLinks.purpose, 'first-owner'),
    isNull(oneTimeLinks.usedAt),
    gt(oneTimeLinks.expiresAt, deps.clock()),
  )

function usedUp(): AppError {
  return new AppError('link-used-up', 'This link was used, has expired, or was replaced by a newer one. Ask your owner for a new link.')
}

/** Whom a link is for; reading it changes nothing. */
export async function readLink(deps: Deps, token: string) {
  const [row] = await deps.db
    .select({ purpose: oneTimeLinks.purpose, expiresAt: oneTimeLinks.expiresAt, name: people.name, email: people.email })
    .from(oneTimeLinks)
    .innerJoin(people, eq(people.id, oneTimeLinks.personId))
    .where(and(usable(deps, token), eq(people.isActive, true)))
  if (row === undefined || row.purpose === 'first-owner') throw usedUp()
  return { purpose: row.purpose, name: row.name, email: row.email, expiresAt: row.expiresAt.toISOString() }
}

/** Sets the password of the person whom the link is for: once. Their sessions end; nobody is signed in by it. */
export async function acceptLink(deps: Deps, token: string, password: string): Promise<void> {
  const { name, email } = await readLink(deps, token)
  checkPassword(password, { name, email, shopName: await readShopName(deps.db) })
  const passwordHash = await deps.passwords.hash(password)
  await deps.db.transaction(async (tx) => {
    // The condition stands in the statement: of two uses at once, one finds the link used.
    const [used] = await tx.update(oneTimeLinks).set({ usedAt: deps.clock() }).where(usable(deps, token)).returning({ personId: oneTimeLinks.personId })
    if (!used?.personId) throw usedUp()
    const set = await tx
      .update(people)
      .set({ passwordHash })
      .where(and(eq(people.id, used.personId), eq(people.isActive, true)))
      .returning({ id: people.id })
    if (set.length === 0) throw usedUp()
    await endSessionsOf(tx, used.personId)
    await writeAudit(tx, deps, { act: 'password-set', personId: used.personId, subject: used.personId })
  })
}
