import { and, eq, gt, sql } from 'drizzle-orm'
import { oneTimeLinks, people } from '#server/db/schema/people.ts'
import type { Db } from '#server/db/client.ts'
import { AppError } from '#server/lib/app-error.ts'
import type { Deps } from '#server/lib/deps.ts'
import { writeAudit } from './audit.ts'
import { checkPassword } from './password-rules.ts'
import { hashSecret, startSession, type StartedSession } from './sessions.ts'
import { createShop, hasOwner, readShopName } from './shop.ts'
import { takeTry } from './throttle.ts'

/** Letters and digits that are not taken for one another (Crockford's base 32). */
const alphabet = '0123456789ABCDEFGHJKMNPQRSTVWXYZ'
const codeCharacters = 28
const lifetimeSeconds = 86_400

/**
 * Makes the one-time code for the first owner and hands it out once, for the server to print: 140 random bits, kept as a hash, good
 * for a day. Null when there is an owner. Codes printed by other processes of the shop stay good until they expire.
 */
export async function makeOwnerCode(deps: Deps): Promise<{ code: string; expiresAt: Date } | null> {
  if (await hasOwner(deps.db)) return null
  const code = [...Buffer.from(deps.randomToken(codeCharacters), 'base64url')].map((byte) => alphabet[byte % alphabet.length]).join('')
  const now = deps.clock()
  const expiresAt = new Date(now.getTime() + lifetimeSeconds * 1000)
  await deps.db
    .insert(oneTimeLinks)
    .values({ id: deps.newId(), purpose: 'first-owner', personId: null, tokenHash: hashSecret(code), createdAt: now, expiresAt })
  return { code: (code.match(/.{4}/g) ?? []).join('-'), expiresAt }
}

/** A code as it was made, however it was typed: without dashes and spaces, and with the letters that stand for digits read as digits. */
function normalise(code: string): string {
  return code.toUpperCase().replace(/[\s-]/g, '').replaceAll('O', '0').replace(/[IL]/g, '1')
}

interface FirstOwner {
  readonly code: string
  readonly name: string
  readonly email: string
  readonly password: string
  readonly address: string
  readonly browser: string
}

/** Creates the first owner, with the code that the server printed, and signs them in. */
export async function createFirstOwner(deps: Deps, given: FirstOwner): Promise<StartedSession> {
  if (await hasOwner(deps.db)) throw alreadySetUp()
  await takeTry(deps, { kind: 'owner-code', of: given.address, tries: 10, windowSeconds: 600 })
  // The lookup is by hash: how long it takes says nothing about how much of a code was right.
  const isThisCode = and(
    eq(oneTimeLinks.purpose, 'first-owner'),
    eq(oneTimeLinks.tokenHash, hashSecret(normalise(given.code))),
    gt(oneTimeLinks.expiresAt, deps.clock()),
  )
  const [known] = await deps.db.select({ id: oneTimeLinks.id }).from(oneTimeLinks).where(isThisCode)
  if (known === undefined) throw wrongCode()
  checkPassword(given.password, { name: given.name, email: given.email, shopName: await readShopName(deps.db) })
  const passwordHash = await deps.passwords.hash(given.password)
  return deps.db.transaction(async (tx) => {
    await lockFirstOwner(tx)
    if (await hasOwner(tx)) throw alreadySetUp()
    const taken = await tx.delete(oneTimeLinks).where(isThisCode).returning({ id: oneTimeLinks.id })
    if (taken.length === 0) throw wrongCode()
    await tx.delete(oneTimeLinks).where(eq(oneTimeLinks.purpose, 'first-owner'))
    return insertOwner(tx, deps, { ...given, passwordHash })
  })
}

async function insertOwner(tx: Db, deps: Deps, owner: Omit<FirstOwner, 'code' | 'password'> & { passwordHash: string }): Promise<StartedSession> {
  const personId = deps.newId() as StartedSession['personId']
  await createShop(tx, deps, { name: 'Our shop', isDemo: false })
  await tx
    .insert(people)
    .values({ id: personId, name: owner.name, email: owner.email, role: 'owner', passwordHash: owner.passwordHash, createdAt: deps.clock() })
  await writeAudit(tx, deps, { act: 'owner-created', personId, subject: personId })
  return startSession(tx, deps, { personId, browser: owner.browser })
}

/** Two codes used at once make one owner: the second waits here and then finds the first. */
async function lockFirstOwner(tx: Db): Promise<void> {
  await tx.execute(sql`select pg_advisory_xact_lock(7325001)`)
}

function alreadySetUp(): AppError {
  return new AppError('already-set-up', 'This shop has its owner already. Sign in, or ask the owner for a link.')
}

function wrongCode(): AppError {
  const detail =
    "This is not the code that the server printed, or it is older than a day. Look at the last lines of the server's window; starting it again prints a new one."
  return new AppError('wrong-code', detail, { errors: [{ pointer: '#/code', detail }] })
}
