import { createBcryptPasswords } from './adapters/passwords/bcrypt-passwords.ts'
import type { Database, Db } from './db/client.ts'
import { oneTimeLinks, people } from './db/schema/people.ts'
import { shops } from './db/schema/shops.ts'
import { settleConfig } from './lib/config.ts'
import type { Environment } from './lib/config.ts'
import type { Deps } from './lib/deps.ts'
import { createIdSource, randomToken } from './lib/ids.ts'
import type { Log } from './lib/log.ts'
import { keepSessionSecret } from './lib/session-secret.ts'
import { StartRefusal } from './lib/start-refusal.ts'
import { bcryptCost } from './services/password-hash.ts'
import { isDemoShop } from './services/shop.ts'

/** Everything that services need, over an open database. */
export type OpenShop = {
  readonly deps: Deps
  /** True when nobody has set up anything yet. */
  readonly isUntouched: boolean
}

/** Settles what the environment leaves open, over an open database. */
export async function openShop(database: Database, environment: Environment, log: Log): Promise<OpenShop> {
  const { db } = database
  const isUntouched = await hasNothing(db)
  const demo = await decideDemo(environment, db, isUntouched)
  const config = settleConfig(environment, { sessionSecret: environment.sessionSecret ?? (await keepSessionSecret(environment.dataFolder)), demo })
  const deps = { config, db, database, log, clock: () => new Date(), newId: createIdSource(Date.now), randomToken, passwords: createBcryptPasswords(bcryptCost) }
  return { deps, isUntouched }
}

/** Before the first owner, or the code for one, or the demo shop, these three tables are empty. */
async function hasNothing(db: Db): Promise<boolean> {
  for (const table of [shops, people, oneTimeLinks]) {
    if ((await db.$count(table)) > 0) return false
  }
  return true
}

/** A new data folder shows the demo shop unless it is told not to; a shop that is there is what it is. */
async function decideDemo({ demo, isProduction, databaseUrl, dataFolder }: Environment, db: Db, isUntouched: boolean): Promise<boolean> {
  if (isUntouched) return demo ?? (databaseUrl === null && !isProduction)
  const isDemo = await isDemoShop(db)
  const place = databaseUrl === null ? `the data folder ${dataFolder}` : 'the database'
  const other = databaseUrl === null ? 'another folder with PULLCORD_DATA, for example PULLCORD_DATA=./shop' : 'another database with DATABASE_URL'
  if (demo === false && isDemo) throw new StartRefusal(`DEMO is 0, and ${place} holds the demo shop, whose sign-ins everybody knows. Name ${other}. Nothing was changed.`)
  if (demo === true && !isDemo) throw new StartRefusal(`DEMO is 1, and ${place} holds a shop of your own. Leave DEMO out to serve it, or name ${other}. Nothing was changed.`)
  return isDemo
}
