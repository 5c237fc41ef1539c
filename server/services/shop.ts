import { and, eq } from 'drizzle-orm'
import type { Session, SignedIn } from '#shared/api/session.ts'
import { defaultNumberFormat } from '#shared/units/number-format.ts'
import type { Db } from '#server/db/client.ts'
import { people } from '#server/db/schema/people.ts'
import { shops } from '#server/db/schema/shops.ts'
import type { Deps } from '#server/lib/deps.ts'
import { demoSignIns } from './demo-sign-ins.ts'

const newShop = { name: 'Our shop', numberFormat: defaultNumberFormat, isDemo: false }

/** Writes the settings row of a new database; one that is there stays as it is. */
export async function createShop(tx: Db, deps: Deps, { name, isDemo }: { name: string; isDemo: boolean }): Promise<void> {
  await tx.insert(shops).values({ id: 1, name, numberFormat: newShop.numberFormat, isDemo, createdAt: deps.clock() }).onConflictDoNothing()
}

/** Whether there is an owner who can sign in; until there is, the one-time code makes one. */
export async function hasOwner(db: Db): Promise<boolean> {
  const owners = await db.select({ id: people.id }).from(people).where(eq(people.role, 'owner')).limit(1)
  return owners.length > 0
}

/** Whether this database is the demo shop, whose sign-ins everybody knows. */
export async function isDemoShop(db: Db): Promise<boolean> {
  const rows = await db
    .select({ id: shops.id })
    .from(shops)
    .where(and(eq(shops.id, 1), eq(shops.isDemo, true)))
  return rows.length > 0
}

/** Who is signed in, in which shop. */
export async function describeSession(deps: Deps, person: SignedIn | null): Promise<Session> {
  const [shop = newShop] = await deps.db.select({ name: shops.name, numberFormat: shops.numberFormat, isDemo: shops.isDemo }).from(shops).where(eq(shops.id, 1))
  return {
    person,
    shop: { name: shop.name, numberFormat: shop.numberFormat },
    needsOwner: !(await hasOwner(deps.db)),
    demoSignIns: shop.isDemo && !deps.config.isProduction ? demoSignIns.map(({ name, role, email, password }) => ({ name, role, email, password })) : [],
  }
}

/** The name of the shop, as its people know it. */
export async function readShopName(db: Db): Promise<string> {
  const [shop = newShop] = await db.select({ name: shops.name }).from(shops).where(eq(shops.id, 1))
  return shop.name
}

/** Whether anybody has set anything up here. */
export async function isSetUp(db: Db): Promise<boolean> {
  return (await db.$count(shops)) > 0 || (await db.$count(people)) > 0
}
