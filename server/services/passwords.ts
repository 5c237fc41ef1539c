import { eq } from 'drizzle-orm'
import { people } from '#server/db/schema/people.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { writeAudit } from './audit.ts'
import { checkPassword } from './password-rules.ts'
import { endSessionsOf, type CurrentSession } from './sessions.ts'
import { readShopName } from './shop.ts'
import { forgetTries, takeTry, type Limit } from './throttle.ts'

/** Changes one's own password: needs the present one, and ends the person's other sessions. */
export async function changePassword(deps: Deps, by: CurrentSession, { present, password }: { present: string; password: string }): Promise<void> {
  const limit: Limit = { kind: 'present-password', of: by.person.id, tries: 10, windowSeconds: 900 }
  await takeTry(deps, limit)
  const [row] = await deps.db.select({ passwordHash: people.passwordHash }).from(people).where(eq(people.id, by.person.id))
  if (!row?.passwordHash || !(await deps.passwords.verify(present, row.passwordHash))) {
    const detail = 'This is not your present password.'
    throw new AppError('wrong-present-password', detail, { errors: [{ pointer: '#/present', detail }] })
  }
  checkPassword(password, { name: by.person.name, email: by.person.email, shopName: await readShopName(deps.db) })
  const passwordHash = await deps.passwords.hash(password)
  await deps.db.transaction(async (tx) => {
    await tx.update(people).set({ passwordHash }).where(eq(people.id, by.person.id))
    await endSessionsOf(tx, by.person.id, by.id)
    await writeAudit(tx, deps, { act: 'password-changed', personId: by.person.id, subject: by.person.id })
  })
  await forgetTries(deps.db, limit)
}
